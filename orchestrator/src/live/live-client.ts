import { toLiveSchema, type FromLive } from '@cresthold/shared';
import type { WebSocket } from 'ws';
import { isInScope, type RigScope } from '../auth/rig-scope.js';

/** Bytes waiting in a socket above which telemetry is dropped; its gap shows in its sequence number. */
const dropAboveBytes = 256 * 1024;
/** Bytes above which the reader is given up: nothing but telemetry may be dropped. */
const giveUpAboveBytes = 4 * 1024 * 1024;

/** One open socket: what it wants to hear, and how much of it it can take. */
export class LiveClient {
  /** Set by every pong, cleared by every ping. */
  isAlive = true;
  private readonly rigIds = new Set<string>();

  /**
   * @param sessionId session of the handshake, which is looked at again while the socket is open
   * @param scope rigs that it may hear of
   */
  constructor(
    private readonly socket: WebSocket,
    readonly sessionId: string,
    public scope: RigScope,
  ) {
    socket.on('pong', () => (this.isAlive = true));
    socket.on('message', (data, isBinary) => this.receive(data, isBinary));
    // An error of a socket is followed by its close.
    socket.on('error', () => undefined);
  }

  isSubscribed(rigId: string): boolean {
    return this.rigIds.has(rigId) && this.mayHearOf(rigId);
  }

  mayHearOf(rigId: string): boolean {
    return isInScope(this.scope, rigId);
  }

  /** Sends what must arrive; a reader too slow for it is disconnected, and comes back to a fresh status. */
  send(text: string): void {
    if (this.socket.bufferedAmount > giveUpAboveBytes) this.socket.terminate();
    else this.socket.send(text, () => undefined);
  }

  /** Sends what may be dropped. */
  sendIfRoom(text: string): void {
    if (this.socket.bufferedAmount <= dropAboveBytes) this.socket.send(text, () => undefined);
  }

  /** @returns false where the ping before was not answered: the socket is then closed */
  ping(): boolean {
    if (!this.isAlive) {
      this.socket.terminate();
      return false;
    }
    this.isAlive = false;
    this.socket.ping(() => undefined);
    return true;
  }

  close(code: number, reason: string): void {
    this.socket.close(code, reason);
  }

  private receive(data: WebSocket.RawData, isBinary: boolean): void {
    const message = isBinary ? null : parse(data);
    if (message === null) {
      const text = 'This is no message of the live connection: send subscribe or unsubscribe with a rigId.';
      this.send(JSON.stringify({ type: 'error', message: text } satisfies FromLive));
      return;
    }
    if (message.type === 'subscribe' && !this.mayHearOf(message.rigId)) {
      const text = 'Your role reaches other rigs, not this one.';
      this.send(JSON.stringify({ type: 'error', message: text } satisfies FromLive));
    } else if (message.type === 'subscribe') this.rigIds.add(message.rigId);
    else this.rigIds.delete(message.rigId);
  }
}

function parse(data: WebSocket.RawData) {
  try {
    // Without binary frames `ws` hands over a Buffer.
    const parsed = toLiveSchema.safeParse(JSON.parse((data as Buffer).toString('utf8')));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}
