import { describe, expect, it } from 'vitest';
import type { SeekActuator, SeekParameters } from './seek/seek-parameters.schema.js';
import {
  bestOf,
  curvatureOf,
  seekInEngine,
  worstOf,
  type SeekCase,
  type SeekCourse,
} from './seek-in-engine.fixture.js';

type Law = SeekParameters['law'];

const actuator = (channel: string, change: Partial<SeekActuator> = {}): SeekActuator => ({
  ...{ channel, min: null, max: null, amplitude: 0.5, periodS: 1, phaseDeg: 0, dither: null },
  ...{ measuredChannel: null, gain: 0.05, speedMax: null, own: {} },
  ...change,
});
const end = (afterS: number) => ({ afterS, whenConverged: null, when: null });

interface LawCase {
  name: string;
  law: Law;
  trim?: Partial<SeekActuator>;
  load?: Partial<SeekActuator>;
  change?: Partial<SeekParameters>;
  /** Where `trim` is to end, and how near, %. */
  trimAt?: number;
  within?: number;
}

const constraint = { expression: 'trim', bound: 1 };

/** Each law as it can be sized for the plant of the fixture, which answers within a scan. */
const cases: LawCase[] = [
  { name: 'gradient', law: { id: 'gradient', parameters: {} } },
  {
    name: 'gradient by a square',
    law: { id: 'gradient', parameters: {} },
    trim: { dither: 'square', periodS: 2 },
  },
  { name: 'discrete', law: { id: 'discrete', parameters: {} }, trim: { gain: 0.0025 }, load: { gain: 0.05 } },
  {
    name: 'newton',
    law: { id: 'newton', parameters: { rate: 0.1, inverseRate: 0.1 } },
    trim: { gain: null, own: { curvature: curvatureOf.trim } },
    load: { gain: null, own: { curvature: curvatureOf.load } },
  },
  { name: 'least squares', law: { id: 'least-squares', parameters: {} } },
  { name: 'bounded rate', law: { id: 'bounded-rate', parameters: {} }, within: 0.3 },
  {
    name: 'slope',
    law: { id: 'slope', parameters: {} },
    trim: { own: { slope: 1 } },
    load: { own: { slope: 0 } },
    // Its slope is −2·(trim − 2.3).
    trimAt: 1.8,
  },
  {
    name: 'constrained',
    law: { id: 'constrained', parameters: { side: 'below' } },
    change: { constraint },
    trimAt: 1,
    within: 0.15,
  },
  {
    name: 'SPSA',
    law: { id: 'spsa', parameters: { dwellS: 0.5, settleS: 0.35, gainExponent: 0, amplitudeExponent: 0 } },
    trim: { periodS: null, gain: 0.2 },
    load: { periodS: null, gain: 5 },
    within: 0.3,
  },
  {
    name: 'perturb and observe',
    law: { id: 'perturb-observe', parameters: { dwellS: 0.4, settleS: 0.2 } },
    trim: { periodS: null, gain: null, amplitude: 0.2 },
    load: { periodS: null, gain: null, amplitude: 1 },
    within: 0.2,
  },
];

const oneOf = ({ law, trim, change }: LawCase): SeekCase => ({
  law,
  actuators: [actuator('trim', trim)],
  change: { end: end(45), ...change },
});
/** Periods of 1 s and 0.7 s lie clear of each other's lines. */
const bothOf = ({ law, trim, load, change }: LawCase): SeekCase => ({
  law,
  actuators: [
    actuator('trim', trim),
    actuator('load', { amplitude: 2, periodS: trim?.dither === 'square' ? 1.4 : 0.7, gain: 1, ...load }),
  ],
  change: { end: end(90), ...change },
});

function expectInOrder(course: SeekCourse): void {
  expect(course.ended?.status).toBe('finished');
  expect(course.events.filter(({ type }) => type === 'guard.intervened')).toEqual([]);
  const { slew, range } = worstOf(course);
  expect(slew).toBeLessThan(1e-9);
  expect(range).toBeLessThanOrEqual(0);
}

/** The Hold behind the Seek finds the actuator where it was best, to stay. */
function expectHeld({ writes, results }: SeekCourse, channel: 'trim' | 'load'): void {
  const best = results[`seek.best.${channel}`] ?? NaN;
  expect(writes.filter((write) => write[channel] === best).length).toBeGreaterThanOrEqual(3);
}

describe.each(cases)('the law $name in the scan engine', (one) => {
  const { trimAt = bestOf.trim, within = 0.1 } = one;

  it('brings one actuator to its place and leaves it there without dither', () => {
    const course = seekInEngine(oneOf(one));
    expectInOrder(course);
    expect(Math.abs((course.results['seek.best.trim'] ?? NaN) - trimAt)).toBeLessThan(within);
    expect(course.results['seek.objective']).toBeGreaterThan(course.results['seek.objectiveAtStart'] ?? NaN);
    expect(course.results['seek.durationS']).toBeCloseTo(45, 1);
    expect(course.results['seek.isAtEdge']).toBe(0);
    expectHeld(course, 'trim');
  });

  it('brings two actuators to their places', () => {
    const course = seekInEngine(bothOf(one));
    expectInOrder(course);
    expect(Math.abs((course.results['seek.best.trim'] ?? NaN) - trimAt)).toBeLessThan(2 * within);
    expect(Math.abs((course.results['seek.best.load'] ?? NaN) - bestOf.load)).toBeLessThan(1.5);
    expectHeld(course, 'trim');
    expectHeld(course, 'load');
  });

  it('is paused and resumed without a jump', () => {
    const course = seekInEngine({ ...bothOf(one), change: { end: end(16), ...one.change }, pauseAtS: 11.13 });
    expectInOrder(course);
    expect(course.events.some(({ type }) => type === 'run.resumed')).toBe(true);
  });

  it('goes back at the slew limit, all actuators together, where the objective is invalid', () => {
    const isLit = (tS: number) => tS % 6.7 < 6;
    const course = seekInEngine({ ...bothOf(one), change: { end: end(22), ...one.change }, isLit });
    expectInOrder(course);
    const retreats = course.events.flatMap((event) => (event.type === 'seek.retreated' ? [event] : []));
    expect(retreats.length).toBeGreaterThan(2);
    for (const { point, to } of retreats) expect(point).toMatchObject({ trim: to });
  });
});

describe('the plant’s own ripple as the dither', () => {
  it('is followed on its channel, and nothing is injected', () => {
    const trim = actuator('trim', {
      dither: 'measured',
      measuredChannel: 'trim',
      amplitude: 0.2,
      gain: 0.05,
    });
    const course = seekInEngine({
      law: { id: 'gradient', parameters: {} },
      actuators: [trim],
      change: { end: end(90) },
      rippleOf: (tS) => 0.5 * Math.sin(2 * Math.PI * tS),
    });
    expectInOrder(course);
    expect(Math.abs((course.results['seek.best.trim'] ?? NaN) - bestOf.trim)).toBeLessThan(0.15);
    // What is written moves with the estimate alone.
    const sought = course.writes.filter(({ tS }) => tS < 85).map((write) => write.trim);
    const steps = sought.slice(1).map((now, i) => Math.abs(now - (sought[i] ?? NaN)));
    expect(Math.max(...steps)).toBeLessThan(0.05);
  });
});
