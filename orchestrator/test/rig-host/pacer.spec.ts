import { setTimeout as delay } from 'node:timers/promises';
import { monotonicS } from '../../src/rig-host/monotonic-clock.js';
import { PeriodPacer } from '../../src/rig-host/pacer.js';

describe('period pacer', () => {
  it('keeps to absolute due times: lateness does not add up', async () => {
    const pacer = new PeriodPacer(0.01);
    await pacer.next();
    const startS = monotonicS();
    let latenessS = 0;
    for (let i = 0; i < 30; i += 1) latenessS = await pacer.next();
    // The last scan was due 30 periods after the first, and says how late it is itself.
    const skipped = Math.round((monotonicS() - startS - latenessS) / 0.01) - 30;
    expect(skipped).toBeGreaterThanOrEqual(0);
    expect(monotonicS() - startS).toBeGreaterThanOrEqual(0.3 - 0.001);
  });

  it('reports lateness against the due time, and skips missed periods instead of a burst', async () => {
    const pacer = new PeriodPacer(0.02);
    await pacer.next();
    await delay(70);
    const latenessS = await pacer.next();
    expect(latenessS).toBeGreaterThanOrEqual(0.049);
    const beforeS = monotonicS();
    await pacer.next();
    await pacer.next();
    // Two scans later at least one whole period has passed: no burst makes up for what was missed.
    expect(monotonicS() - beforeS).toBeGreaterThanOrEqual(0.02);
  });

  it('never begins a scan before it is due', async () => {
    const pacer = new PeriodPacer(0.004);
    // Before the first scan, whose beginning the due times are counted from.
    const startS = monotonicS();
    await pacer.next();
    for (let i = 1; i <= 20; i += 1) {
      await pacer.next();
      expect(monotonicS() - startS).toBeGreaterThanOrEqual(i * 0.004);
    }
  });

  it('ends a long wait at once when hurried', async () => {
    const pacer = new PeriodPacer(10);
    await pacer.next();
    const startS = monotonicS();
    setTimeout(() => pacer.hurry(), 20);
    expect(await pacer.next()).toBe(0);
    expect(monotonicS() - startS).toBeLessThan(5);
  });
});
