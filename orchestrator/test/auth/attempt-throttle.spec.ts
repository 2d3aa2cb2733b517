import { AttemptThrottle } from '../../src/auth/attempt-throttle.js';

const rule = { freeAttempts: 3, firstWaitS: 2, maxWaitS: 60, forgetAfterS: 1000 };

/** Attempts as fast as they are taken, and the waits in between. */
function waits(throttle: AttemptThrottle, attempts: number): number[] {
  let nowS = 0;
  return Array.from({ length: attempts }, () => {
    const waitS = throttle.waitS('k', nowS);
    nowS += waitS;
    throttle.begin('k', nowS);
    return waitS;
  });
}

describe('AttemptThrottle', () => {
  it('lets the free attempts through, then doubles the wait up to its bound', () => {
    expect(waits(new AttemptThrottle(rule), 10)).toEqual([0, 0, 0, 2, 4, 8, 16, 32, 60, 60]);
  });

  it('counts an attempt when it begins, so that many at once gain nothing', () => {
    const throttle = new AttemptThrottle(rule);
    for (let i = 0; i < 3; i += 1) throttle.begin('k', 0);
    expect(throttle.waitS('k', 0)).toBe(2);
  });

  it('forgets on success and after a quiet time, and keeps keys apart', () => {
    const throttle = new AttemptThrottle(rule);
    for (let i = 0; i < 4; i += 1) throttle.begin('k', 0);
    expect(throttle.waitS('other', 0)).toBe(0);
    expect(throttle.waitS('k', 1001)).toBe(0);
    throttle.succeed('k');
    expect(throttle.waitS('k', 0)).toBe(0);
  });

  it('keeps a bounded number of keys, dropping the oldest', () => {
    const throttle = new AttemptThrottle({ ...rule, freeAttempts: 1 });
    for (let i = 0; i <= 10_000; i += 1) throttle.begin(`k${i}`, 0);
    expect(throttle.waitS('k0', 0)).toBe(0);
    expect(throttle.waitS('k1', 0)).toBe(2);
  });
});
