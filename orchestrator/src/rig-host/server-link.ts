import {
  DomainError,
  toErrorRecord,
  toHostSchema,
  type ErrorRecord,
  type FromHost,
  type HostCommand,
} from '@cresthold/shared';
import { monotonicS } from './monotonic-clock.js';
import type { Link } from './publisher.js';

/** Messages under way above which telemetry and status are dropped. */
const backlogMax = 4;

export interface ServerLinkOwner {
  /** Gives what the command was to find out; rejects with a DomainError where it is refused. */
  onCommand(command: HostCommand): Promise<unknown>;
  /** The server closed the channel or died. */
  onServerGone(): void;
}

/** The host's end of the channel to the server: every message is checked, every command answered once. */
export class ServerLink implements Link {
  private lastHeardS = monotonicS();
  private underWay = 0;
  private onDrained: (() => void) | null = null;

  constructor(
    private readonly channel: NodeJS.Process,
    private readonly owner: ServerLinkOwner,
  ) {
    channel.on('message', (value: unknown) => void this.receive(value));
    channel.once('disconnect', () => owner.onServerGone());
  }

  /** Time since a valid message came, s. */
  readonly serverSilentS = (nowS: number): number => Math.max(0, nowS - this.lastHeardS);

  send(message: FromHost): void {
    if (!this.channel.connected) return;
    this.underWay += 1;
    // A failed send means that the channel closed: `disconnect` says so.
    this.channel.send?.(message, undefined, {}, () => {
      this.underWay -= 1;
      if (this.underWay === 0) this.onDrained?.();
    });
  }

  /** Resolves once everything sent so far is on its way. */
  drained(): Promise<void> {
    if (this.underWay === 0) return Promise.resolve();
    return new Promise((resolve) => (this.onDrained = resolve));
  }

  sendDroppable(message: FromHost): boolean {
    if (this.underWay > backlogMax) return false;
    this.send(message);
    return true;
  }

  log(level: 'info' | 'warn' | 'error', text: string): void {
    this.send({ type: 'log', level, text });
  }

  private async receive(value: unknown): Promise<void> {
    const parsed = toHostSchema.safeParse(value);
    if (!parsed.success) return this.refuse(value, parsed.error.issues);
    this.lastHeardS = monotonicS();
    if (parsed.data.type === 'server-alive') return;
    const { requestId, command } = parsed.data;
    this.send({ type: 'reply', requestId, ...(await this.obeyed(command)) });
  }

  private async obeyed(command: HostCommand): Promise<{ error: ErrorRecord | null; data?: unknown }> {
    try {
      const data = await this.owner.onCommand(command);
      return data === undefined ? { error: null } : { error: null, data };
    } catch (thrown) {
      const error = toRecord(thrown);
      if (error.kind === 'bug') this.log('error', `Command "${command.type}" met a fault of the host.`);
      return { error };
    }
  }

  private refuse(value: unknown, issues: readonly { path: PropertyKey[]; message: string }[]): void {
    const details = issues.map(({ path, message }) => ({ field: path.map(String).join('.'), message }));
    const text = details.map(({ field, message }) => `${field || 'message'}: ${message}`).join('; ');
    this.log('error', `The server sent a message that the rig host does not know: ${text}`);
    const requestId = requestIdOf(value);
    if (requestId === null) return;
    const error = new DomainError('request.invalid', undefined, details).toRecord();
    this.send({ type: 'reply', requestId, error });
  }
}

function toRecord(error: unknown): ErrorRecord {
  if (!(error instanceof DomainError)) console.error(error);
  return toErrorRecord(error);
}

function requestIdOf(value: unknown): number | null {
  if (typeof value !== 'object' || value === null || !('requestId' in value)) return null;
  return Number.isInteger(value.requestId) ? (value.requestId as number) : null;
}
