import { DomainError } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { CallQueue } from './call-queue.js';

const lost = new DomainError('adapter.disconnected', 'Gone.');
const code = (error: DomainError): string => error.code;

describe('calls', () => {
  it('run one after another, in order', async () => {
    const calls = new CallQueue();
    const order: string[] = [];
    const call = (name: string) => async () => {
      order.push(`${name} begins`);
      await new Promise((resolve) => setImmediate(resolve));
      order.push(`${name} ends`);
      return name;
    };
    expect(await Promise.all([calls.run(call('a'), code), calls.run(call('b'), code)])).toEqual(['a', 'b']);
    expect(order).toEqual(['a begins', 'a ends', 'b begins', 'b ends']);
  });

  it('that throw do not hold up the next', async () => {
    const calls = new CallQueue();
    const failing = calls.run(() => Promise.reject(new TypeError('a bug')), code);
    const next = calls.run(() => Promise.resolve('fine'), code);
    await expect(failing).rejects.toThrow('a bug');
    expect(await next).toBe('fine');
  });

  it('under way, waiting and to come are all told that the connection has ended', async () => {
    const calls = new CallQueue();
    const under = calls.run(() => calls.waitFor<string>(60_000, 'Nobody', () => undefined), code);
    const waiting = calls.run(() => Promise.resolve('too late'), code);
    await new Promise((resolve) => setImmediate(resolve));
    calls.end(lost);
    calls.end(new DomainError('adapter.cancelled', 'Closed later.'));
    expect(await Promise.all([under, waiting])).toEqual(['adapter.disconnected', 'adapter.disconnected']);
    expect(await calls.run(() => Promise.resolve('never'), code)).toBe('adapter.disconnected');
    expect(calls.ended).toBe(lost);
  });
});

describe('a wait', () => {
  it('ends with the answer', async () => {
    const calls = new CallQueue();
    expect(await calls.waitFor<number>(1000, 'It', (settle) => setImmediate(settle, 7))).toBe(7);
  });

  it('ends in time without one', async () => {
    const calls = new CallQueue();
    const waiting = calls.waitFor(1, 'The bath', () => undefined);
    await expect(waiting).rejects.toMatchObject({
      code: 'adapter.timeout',
      message: expect.stringContaining('The bath'),
    });
  });

  it('does not begin once the connection has ended', async () => {
    const calls = new CallQueue();
    calls.end(lost);
    await expect(calls.waitFor(1, 'It', () => expect.unreachable())).rejects.toBe(lost);
  });
});
