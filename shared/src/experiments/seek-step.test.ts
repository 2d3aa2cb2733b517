import { describe, expect, it } from 'vitest';
import {
  testChain,
  testEnvelope,
  testObjective,
  testRig,
  testStep as s,
  testSeek,
  type SeekChange,
} from './experiment.fixture.js';
import { hill, runScript, type Plant } from './scripted-plant.fixture.js';

const seek = (change: SeekChange = {}) => testChain(testSeek(change));
const end = (afterS: number, change = {}) => ({ afterS, whenConverged: null, when: null, ...change });
const exit = (run: ReturnType<typeof runScript>) => run.of('step.ended').find(({ step }) => step === 'seek');
const trims = (run: ReturnType<typeof runScript>) =>
  run.scans.flatMap(({ requests }) => requests.filter(({ channel }) => channel === 'trim'));

describe('seek', () => {
  it('climbs to the best and leaves the actuator there without dither', () => {
    const run = runScript({ graph: seek({ end: end(120) }), plant: hill });
    expect(run.results['seek.best.trim']).toBeCloseTo(2, 2);
    // Dithering at the optimum costs f''·a²/4 = 2·0.25/4 on average.
    expect(run.results['seek.objective']).toBeCloseTo(90 - 0.125, 3);
    expect(run.results['seek.objectiveAtStart']).toBeLessThan(87);
    expect(run.results['seek.durationS']).toBeCloseTo(120, 1);
    expect(run.results['seek.isConverged']).toBe(0);
    const last = trims(run).at(-1);
    expect(last).toEqual({ channel: 'trim', base: run.results['seek.best.trim'], dither: 0 });
    expect(run.scans.at(-1)?.applied['trim']).toBe(run.results['seek.best.trim']);
  });

  it('climbs behind a first-order lag when its phase makes up for it', () => {
    let y = NaN;
    const lag: Plant = (applied) => {
      const answer = hill(applied, 0)['yield'] ?? NaN;
      y = Number.isNaN(y) ? answer : y + (1 - Math.exp(-0.05 / 0.3)) * (answer - y);
      return { yield: y, flame: 1 };
    };
    // −∠ of 1/(1 + jωτ) with ωτ = 2π·0.3 is 62°, of the washout with ratio 0.3 it is −17°.
    const run = runScript({ graph: seek({ phaseDeg: 45, gain: 0.1, end: end(200) }), plant: lag });
    expect(run.results['seek.best.trim']).toBeCloseTo(2, 1);
  });

  it('goes down where the objective is to be made small', () => {
    const objective = testObjective({ direction: 'minimise', expression: '100 - yield' });
    const run = runScript({ graph: seek({ end: end(120) }), plant: hill, objective });
    expect(run.results['seek.best.trim']).toBeCloseTo(2, 2);
    expect(run.results['seek.objective']).toBeCloseTo(10.125, 3);
  });

  it('keeps estimate and dither inside the envelope', () => {
    const plant: Plant = ({ trim = NaN }) => ({ yield: trim, flame: 1 });
    const run = runScript({ graph: seek({ gain: 2, end: end(60) }), plant });
    expect(Math.max(...trims(run).map(({ base, dither }) => base + dither))).toBeLessThanOrEqual(10);
    expect(run.results['seek.best.trim']).toBe(9.5);
    expect(run.results['seek.isAtEdge']).toBe(1);
    const boxed = runScript({ graph: seek({ gain: 2, max: 3, end: end(60) }), plant });
    expect(boxed.results['seek.best.trim']).toBe(3);
  });

  it('takes the dither out at the slew limit', () => {
    const slewPerS = 3.2;
    const envelope = testEnvelope({ limits: testEnvelope().limits.map((l) => ({ ...l, slewPerS })) });
    const run = runScript({ graph: seek({ end: end(60.25) }), plant: hill, envelope });
    const asked = trims(run).map(({ base, dither }) => base + dither);
    const last = asked.slice(-20);
    last.slice(1).forEach((value, i) => {
      expect(Math.abs(value - (last[i] ?? NaN))).toBeLessThanOrEqual(slewPerS * 0.05);
    });
    // It ended at the crest of the dither.
    expect(Math.max(...last) - (last.at(-1) ?? NaN)).toBeGreaterThan(0.4);
    expect(run.results['seek.isAtEdge']).toBe(0);
  });

  it('ramps into its box before it seeks', () => {
    const envelope = testEnvelope({ limits: testEnvelope().limits.map((l) => ({ ...l, slewPerS: 4 })) });
    const run = runScript({ graph: seek({ min: 4, end: end(60) }), plant: hill, envelope });
    const approach = trims(run).filter((_, i) => i < 19);
    approach.forEach(({ base, dither }, i) => {
      expect(dither).toBe(0);
      expect(base).toBeCloseTo((i + 1) * 0.2, 4);
    });
    expect(run.results['seek.best.trim']).toBeCloseTo(4, 2);
  });

  it('records its inner signals while it seeks and nothing else', () => {
    const run = runScript({ graph: testChain(s('hold'), testSeek({ end: end(20) })), plant: hill });
    expect(run.sequencer.signalNames).toEqual([
      'seek.estimate.trim',
      'seek.washout.trim',
      'seek.demodulated.trim',
      'seek.gradient.trim',
    ]);
    expect(run.scans[3]?.signals).toEqual([NaN, NaN, NaN, NaN]);
    expect(run.scans[200]?.signals.every(Number.isFinite)).toBe(true);
    expect(run.scans[200]?.signals[0]).toBe(run.scans[200]?.requests[0]?.base);
  });
});

describe('the end of a seek', () => {
  it('comes by convergence', () => {
    const whenConverged = { band: 0.01, forS: 10 };
    const run = runScript({ graph: seek({ end: end(500, { whenConverged }) }), plant: hill });
    expect(run.results['seek.isConverged']).toBe(1);
    expect(exit(run)?.reason).toBe('The estimate has converged.');
    expect(run.results['seek.durationS']).toBeLessThan(120);
    expect(run.results['seek.best.trim']).toBeCloseTo(2, 1);
  });

  it('does not come by convergence before the law adapts', () => {
    const whenConverged = { band: 0.001, forS: 0.5 };
    const run = runScript({ graph: seek({ end: end(30, { whenConverged }) }), plant: hill });
    expect(run.results['seek.durationS']).toBeGreaterThan(1.5);
  });

  it('comes by a condition', () => {
    const run = runScript({ graph: seek({ end: end(500, { when: 'trimMean > 1' }) }), ...derived() });
    expect(exit(run)?.reason).toBe('The end condition is met.');
    expect(run.results['seek.best.trim']).toBeGreaterThan(0.3);
    expect(run.results['seek.best.trim']).toBeLessThan(1.2);
  });

  it.each([
    [
      'a dither amplitude that is no number',
      { amplitude: { expression: '1 / (flame - 1)' } },
      '"Dither amplitude" of "trim" came out as no number',
    ],
    [
      'a dither above the envelope',
      { amplitude: { expression: '2 * flame' } },
      'above the 1 of the envelope',
    ],
    [
      'a dither that nothing could show',
      { amplitude: { expression: 'flame * 5e-324' } },
      'is too small for "trim" to show',
    ],
    [
      'a period of zero',
      { periodS: { expression: 'flame - 1' } },
      '"Dither period" of "trim": Too small: expected number to be >0',
    ],
    [
      'a gain below zero',
      { gain: { expression: '-flame' } },
      '"Gain" of "trim": Too small: expected number to be >0',
    ],
    ['a box without room', { min: 9.8 }, 'no room is left'],
  ])('comes at once with %s', (_name, change: SeekChange, reason) => {
    const run = runScript({ graph: seek(change), plant: hill });
    expect(exit(run)).toMatchObject({ port: 'failed', reason: expect.stringContaining(reason) });
    expect(run.end?.reason).toContain(reason);
    expect(trims(run)).toEqual([]);
  });
});

/** A channel with the actuator's value in it, since plants answer with sensors only. */
function derived() {
  const plant: Plant = (applied) => ({ ...hill(applied, 0), trimMean: applied['trim'] ?? NaN });
  return { plant, rig: rigWith('trimMean') };
}

function rigWith(id: string) {
  const display = { min: 0, max: 1, decimals: 1 };
  const channel = {
    kind: 'sensor' as const,
    id,
    title: id,
    unit: '',
    display,
    connection: 'plc',
    address: {},
  };
  return testRig({ channels: [...testRig().channels, channel] });
}

describe('a law out of its numbers', () => {
  it('fails without asking for anything', () => {
    // Swings of the greatest size that a number can have overflow in the filters of the law.
    let n = 0;
    const plant: Plant = () => ({ yield: (n += 1) % 2 === 0 ? 1.7e308 : -1.7e308, flame: 1 });
    const run = runScript({ graph: seek(), plant });
    expect(exit(run)?.port).toBe('failed');
    expect(exit(run)?.reason).toContain('The law gave no number');
    for (const { base, dither } of trims(run)) expect(Number.isFinite(base + dither)).toBe(true);
  });
});

describe('an objective that is not valid', () => {
  it('sends the seek back to its last good point, once an episode, and it goes on', () => {
    // More is better up to the cliff at 3, where the flame goes out.
    const cliff: Plant = ({ trim = NaN }) => ({ yield: 50 + 5 * trim, flame: trim > 3 ? 0 : 1 });
    const run = runScript({ graph: seek({ gain: 0.05, end: end(60), invalidForS: 5 }), plant: cliff });
    const retreats = run.of('seek.retreated');
    expect(retreats.length).toBeGreaterThan(1);
    expect(retreats.length).toBeLessThan(30);
    for (const { to, reason } of retreats) {
      expect(to).toBeLessThan(3);
      expect(reason).toBe('The flame is out.');
    }
    expect(exit(run)?.port).toBe('done');
    expect(run.results['seek.best.trim']).toBeLessThan(3);
    const over = run.scans.filter(({ applied }) => (applied['trim'] ?? 0) > 3);
    expect(over.length / run.scans.length).toBeLessThan(0.05);
  });

  it('ends the seek by "failed" when it lasts, at the last good point', () => {
    const plant: Plant = (applied, tS) => ({ ...hill(applied, tS), flame: tS > 20 ? 0 : 1 });
    const run = runScript({ graph: seek({ end: end(300), invalidForS: 3 }), plant });
    expect(exit(run)).toMatchObject({ port: 'failed', reason: 'The objective was not valid for 3 s.' });
    expect(run.results['seek.durationS']).toBeCloseTo(23, 0);
    expect(run.of('seek.retreated').length).toBe(1);
    const { to } = run.of('seek.retreated')[0] ?? { to: NaN };
    expect(run.scans.at(-1)?.applied['trim']).toBe(to);
    expect(run.results['seek.best.trim']).toBe(to);
  });

  it('is not outlived by flickering', () => {
    let n = 0;
    const plant: Plant = (applied, tS) => ({ ...hill(applied, tS), flame: (n += 1) % 2 });
    const run = runScript({ graph: seek({ end: end(300), invalidForS: 3 }), plant });
    expect(exit(run)?.port).toBe('failed');
    expect(run.results['seek.durationS']).toBeCloseTo(6, 0);
    expect(run.of('seek.retreated').length).toBe(1);
  });
});
