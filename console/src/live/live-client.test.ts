import { beforeEach, describe, expect, it } from 'vitest';
import type { FromLive } from '@cresthold/shared';
import { LiveClient, type LinkState, type LiveSocket } from './live-client.js';

class FakeSocket implements LiveSocket {
  onopen: (() => void) | null = null;
  onclose: (() => void) | null = null;
  onmessage: ((event: { data: unknown }) => void) | null = null;
  readonly sent: string[] = [];
  isClosed = false;
  send(text: string) {
    this.sent.push(text);
  }
  close() {
    this.isClosed = true;
  }
}

interface Timer {
  delayMs: number;
  callback: () => void;
}

let sockets: FakeSocket[];
let timers: Timer[];
let states: LinkState[];
let messages: FromLive[];
let client: LiveClient;

beforeEach(() => {
  [sockets, timers, states, messages] = [[], [], [], []];
  client = new LiveClient({
    connect: () => {
      const socket = new FakeSocket();
      sockets.push(socket);
      return socket;
    },
    after: (delayMs, callback) => {
      const timer = { delayMs, callback };
      timers.push(timer);
      return () => {
        timers = timers.filter((other) => other !== timer);
      };
    },
    random: () => 0.5,
    onMessage: (message) => messages.push(message),
    onState: (state) => states.push(state),
  });
});

const newest = () => sockets.at(-1) as FakeSocket;

/** Lets the only timer that is set run out. */
function runOut(): number {
  expect(timers).toHaveLength(1);
  const [timer] = timers as [Timer];
  timers = [];
  timer.callback();
  return timer.delayMs;
}

describe('the live client', () => {
  it('asks again for what was subscribed when the link comes back', () => {
    client.start();
    client.subscribe('burner-1');
    newest().onopen?.();
    expect(newest().sent).toEqual(['{"type":"subscribe","rigId":"burner-1"}']);

    newest().onclose?.();
    expect(states.at(-1)).toBe('lost');
    runOut();
    newest().onopen?.();
    expect(sockets).toHaveLength(2);
    expect(newest().sent).toEqual(['{"type":"subscribe","rigId":"burner-1"}']);
    expect(states).toEqual(['connecting', 'up', 'lost', 'up']);
  });

  it('waits twice as long after each failure, eight seconds at most, and begins anew after success', () => {
    client.start();
    const delays = Array.from({ length: 6 }, () => {
      newest().onclose?.();
      return runOut();
    });
    expect(delays).toEqual([500, 1000, 2000, 4000, 8000, 8000]);
    newest().onopen?.();
    newest().onclose?.();
    expect(runOut()).toBe(500);
  });

  it('takes a silent link for a lost one, closes it and tries again', () => {
    client.start();
    newest().onopen?.();
    newest().onmessage?.({ data: '{"type":"error","message":"x"}' });
    const first = newest();
    expect(runOut()).toBe(6000);
    expect(first.isClosed).toBe(true);
    expect(states.at(-1)).toBe('lost');
  });

  it('unsubscribes only when the last one has left, and not twice for one', () => {
    client.start();
    newest().onopen?.();
    const leaveA = client.subscribe('burner-1');
    const leaveB = client.subscribe('burner-1');
    leaveA();
    leaveA();
    expect(newest().sent).toEqual(['{"type":"subscribe","rigId":"burner-1"}']);
    leaveB();
    expect(newest().sent.at(-1)).toBe('{"type":"unsubscribe","rigId":"burner-1"}');
  });

  it('leaves out what is no message of the contract', () => {
    client.start();
    newest().onopen?.();
    newest().onmessage?.({ data: 'not JSON' });
    newest().onmessage?.({ data: '{"type":"telemetry"}' });
    newest().onmessage?.({ data: '{"type":"error","message":"no such rig"}' });
    expect(messages).toEqual([{ type: 'error', message: 'no such rig' }]);
  });

  it('stays down once it was stopped', () => {
    client.start();
    newest().onopen?.();
    client.stop();
    expect(newest().isClosed).toBe(true);
    expect(timers).toHaveLength(0);
    expect(states.at(-1)).toBe('idle');
  });
});
