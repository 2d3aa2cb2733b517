import { describe, expect, it } from 'vitest';
import { VirtualBurner } from './virtual-burner.fixture.js';

const scanS = 0.05;

/** Times between scans as a loaded machine makes them: from three tenths of a period to three periods, s. */
function jitter(): number {
  state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
  const share = state / 2 ** 32;
  return scanS * (share < 0.9 ? 0.3 + 1.3 * share : 1.5 + 15 * (share - 0.9));
}
let state = 7;

describe.each([
  ['on time', () => scanS],
  ['as a loaded machine scans', jitter],
])('the experiment of the demo, run to its end in virtual time, %s', (_, dtS) => {
  const burner = new VirtualBurner(11);
  const { engine, simulation, entry } = burner;
  for (let i = 0; i < 60; i += 1) burner.scan();
  engine.arm('engineer');
  engine.startRun(burner.order());

  /** True shortfall below the best in each scan of the seek, points. */
  const shortfalls: number[] = [];
  let ended: ReturnType<typeof burner.scan>['runEnded'] = null;
  const steps: string[] = [];
  let guarded = 0;
  for (let i = 0; i < 12_000 && !ended; i += 1) {
    const output = burner.scan(dtS());
    guarded += output.events.filter(({ body }) => body.type === 'guard.intervened').length;
    ended = output.runEnded;
    for (const { body } of output.events)
      if (body.type === 'step.ended') steps.push(`${body.step}.${body.port}`);
    if (engine.status().activeSteps.includes('seek')) {
      const { best, efficiencyPct } = simulation.truth;
      shortfalls.push(best.efficiencyPct - efficiencyPct);
    }
  }

  it('passes by the way that is drawn', () => {
    expect(steps).toEqual([
      'start.done',
      'survey.done',
      'move.done',
      'settle.done',
      'seek.done',
      'check.yes',
    ]);
    expect(ended).toMatchObject({ status: 'finished', verdict: 'pass' });
  });

  it('leaves the guard nothing to do', () => {
    expect(guarded).toBe(0);
  });

  it('starts at least two points below the true best and ends within a tenth of it', () => {
    expect(shortfalls[0]).toBeGreaterThan(2);
    const lastTwoBenchMinutes = shortfalls.slice(-480);
    const mean = lastTwoBenchMinutes.reduce((sum, value) => sum + value, 0) / lastTwoBenchMinutes.length;
    expect(mean).toBeLessThan(0.1);
  });

  it('never tells the burner an air trim outside the envelope', () => {
    const limit = entry.envelope.content.limits[0];
    expect(burner.trims.length).toBeGreaterThan(1000);
    expect(Math.min(...burner.trims)).toBeGreaterThanOrEqual(limit?.min ?? NaN);
    expect(Math.max(...burner.trims)).toBeLessThanOrEqual(limit?.max ?? NaN);
  });

  it('comes back to its rest value', () => {
    for (let i = 0; i < 200; i += 1) burner.scan();
    expect(engine.status()).toMatchObject({ phase: 'idle', trip: null });
    expect(simulation.now.damperPct).toBeCloseTo(70, 9);
  });
});
