import { RestartBudget } from '../../src/rig-hosts/supervision/restart-budget.js';

const policy = { restartsMax: 3, windowMs: 1_000, firstDelayMs: 10, delayMaxMs: 25 };

describe('the restart budget', () => {
  it('grants with growing delay, bounded, until it is spent', () => {
    const budget = new RestartBudget(policy);
    expect([0, 1, 2, 3].map((nowMs) => budget.take(nowMs))).toEqual([10, 20, 25, null]);
  });

  it('forgets restarts after its window', () => {
    const budget = new RestartBudget(policy);
    for (const nowMs of [0, 400, 800]) budget.take(nowMs);
    expect(budget.take(999)).toBeNull();
    expect(budget.take(1_000)).toBe(25);
  });

  it('begins anew by hand', () => {
    const budget = new RestartBudget(policy);
    for (const nowMs of [0, 1, 2]) budget.take(nowMs);
    budget.refill();
    expect(budget.take(3)).toBe(10);
  });
});
