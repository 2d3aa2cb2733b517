import { fromLiveSchema, type FromLive, type ToLive } from '@cresthold/shared';

/** The part of a WebSocket that the client needs. */
export interface LiveSocket {
  send(text: string): void;
  close(): void;
  onopen: (() => void) | null;
  onclose: (() => void) | null;
  onmessage: ((event: { data: unknown }) => void) | null;
}

/** `lost` only after it was once up or the first try failed; then it keeps trying. */
export type LinkState = 'idle' | 'connecting' | 'up' | 'lost';

export interface LiveClientOptions {
  connect: () => LiveSocket;
  /** Runs a callback later. @returns what cancels it */
  after: (delayMs: number, callback: () => void) => () => void;
  /** Number in [0, 1) that spreads the tries of many consoles. */
  random: () => number;
  onMessage: (message: FromLive) => void;
  onState: (state: LinkState) => void;
}

const firstDelayMs = 500;
const longestDelayMs = 8_000;
/** The server sends every rig's status once a second; silence for longer means that the link is dead. */
const silenceMs = 6_000;

/** One WebSocket to the live feed that comes back by itself and asks again for what was subscribed. */
export class LiveClient {
  private socket: LiveSocket | null = null;
  private isStarted = false;
  private failures = 0;
  private cancelTimer: () => void = () => undefined;
  private readonly subscribers = new Map<string, number>();

  constructor(private readonly options: LiveClientOptions) {}

  start(): void {
    if (this.isStarted) return;
    this.isStarted = true;
    this.options.onState('connecting');
    this.open();
  }

  stop(): void {
    this.isStarted = false;
    this.failures = 0;
    this.drop();
    this.options.onState('idle');
  }

  /** Asks for a rig's samples and run events. @returns what ends it; the last one out unsubscribes */
  subscribe(rigId: string): () => void {
    const count = this.subscribers.get(rigId) ?? 0;
    this.subscribers.set(rigId, count + 1);
    if (count === 0) this.say({ type: 'subscribe', rigId });
    let isOver = false;
    return () => {
      if (isOver) return;
      isOver = true;
      this.leave(rigId);
    };
  }

  private leave(rigId: string): void {
    const left = (this.subscribers.get(rigId) ?? 1) - 1;
    if (left > 0) {
      this.subscribers.set(rigId, left);
      return;
    }
    this.subscribers.delete(rigId);
    this.say({ type: 'unsubscribe', rigId });
  }

  private isUp = false;

  private say(message: ToLive): void {
    if (this.isUp) this.socket?.send(JSON.stringify(message));
  }

  private open(): void {
    const socket = this.options.connect();
    this.socket = socket;
    socket.onopen = () => {
      this.isUp = true;
      this.failures = 0;
      this.options.onState('up');
      for (const rigId of this.subscribers.keys()) this.say({ type: 'subscribe', rigId });
      this.watchForSilence();
    };
    socket.onmessage = (event) => {
      this.watchForSilence();
      this.receive(event.data);
    };
    socket.onclose = () => this.retry();
    this.watchForSilence();
  }

  private receive(data: unknown): void {
    if (typeof data !== 'string') return;
    const parsed = fromLiveSchema.safeParse(parseJson(data));
    if (parsed.success) this.options.onMessage(parsed.data);
    else console.warn('A live message that this console does not know was left out.');
  }

  private watchForSilence(): void {
    this.cancelTimer();
    this.cancelTimer = this.options.after(silenceMs, () => this.retry());
  }

  private retry(): void {
    this.drop();
    if (!this.isStarted) return;
    this.options.onState('lost');
    const delayMs =
      Math.min(longestDelayMs, firstDelayMs * 2 ** this.failures) * (0.75 + this.options.random() / 2);
    this.failures += 1;
    this.cancelTimer = this.options.after(delayMs, () => this.open());
  }

  private drop(): void {
    this.cancelTimer();
    this.isUp = false;
    const socket = this.socket;
    this.socket = null;
    if (!socket) return;
    socket.onopen = null;
    socket.onclose = null;
    socket.onmessage = null;
    socket.close();
  }
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
