import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { runEventBodySchema } from '../runs/run-event.schema.js';
import { Quality } from '../rigs/quality.js';
import { Readings } from '../scan/readings.js';
import {
  testEnvelope,
  testGraph,
  testObjective,
  testRig,
  testStep as s,
  testSeek,
  testSurvey,
} from './experiment.fixture.js';
import type { Step } from './experiment.schema.js';
import { createSequencer } from './sequencer.js';
import { stepKinds } from './step-kinds.js';

const rig = testRig();
const wild = fc.oneof(
  fc.double(),
  fc.double({ min: -20, max: 20 }),
  fc.constantFrom(NaN, Infinity, 1e300, 0),
);
const calm = fc.double({ min: 0.1, max: 9, noNaN: true });
/** Mostly good, so that steps go on, and now and then anything. */
const reading = fc.oneof(
  { weight: 30, arbitrary: fc.tuple(calm, fc.constant<Quality>(Quality.good)) },
  { weight: 1, arbitrary: fc.tuple(wild, fc.constantFrom<Quality>(...Object.values(Quality))) },
);

/** One step of each kind with parameters that depend on readings, short enough to come to their ends. */
const steps = (): Step[] => [
  s('start'),
  s('move', { targets: [{ channel: 'trim', value: { expression: 'yield' } }], rampS: 0.1, timeoutS: 0.3 }),
  s('settle', { forS: 0.1, timeoutS: 0.3, band: 5 }),
  s('hold', { durationS: 0.1 }),
  testSurvey({ points: 3, settleS: 0, averageS: 0.05, to: { expression: 'flame * 5' } }),
  testSeek({
    amplitude: { expression: 'abs(loss)' },
    periodS: 0.2,
    end: { afterS: 0.8, whenConverged: { band: 1, forS: 0.4 }, when: 'yield > 15' },
    invalidForS: 0.3,
  }),
  s('check', { criterion: 'seek.objective > survey.best.objective or objective > 0' }),
  s('finish'),
];
const ids = steps().map(({ id }) => id);
const ports = steps().flatMap(({ id, kind }) => stepKinds[kind].ports.map((port) => ({ id, port })));
/** Every port leads anywhere or nowhere. */
const edges = fc
  .tuple(...ports.map(() => fc.constantFrom(...[...ids, ...ids].filter((id) => id !== 'start'), null)))
  .map((targets) => targets.flatMap((to, i) => (to ? [`${ports[i]?.id}.${ports[i]?.port}>${to}`] : [])));

const scan = fc.record({
  readings: fc.array(reading, { minLength: rig.channels.length, maxLength: rig.channels.length }),
  /** Where the actuator is found; null where it follows. */
  position: fc.oneof({ weight: 30, arbitrary: fc.constant(null) }, { weight: 1, arbitrary: wild }),
  dtS: fc.oneof({ weight: 9, arbitrary: fc.constant(0.05) }, fc.double({ min: 1e-3, max: 1, noNaN: true })),
});
const envelope = testEnvelope();
const anObjective = testObjective();

/** Runs random graphs over random readings and holds what the sequencer asks for and says. */
export function describeWildSequencer(numRuns: number, timeoutMs: number): void {
  describe('whatever is read', () => {
    it(
      'asks for finite values of actuators with a limit only, speaks as the schema says, and never throws',
      () => {
        let asked = 0;
        fc.assert(
          fc.property(
            edges,
            fc.array(scan, { minLength: 20, maxLength: 80 }),
            fc.boolean(),
            (edges, scans, hasObjective) => {
              const objective = hasObjective ? anObjective : null;
              const graph = testGraph(steps(), edges);
              const sequencer = createSequencer({ rig, envelope, objective, graph, periodS: 0.05 });
              const readings = new Readings(rig.channels.map(({ id }) => id));
              let tS = 0;
              const follows = { base: 0, dither: 0 };
              for (const { readings: read, position, dtS } of scans) {
                tS += dtS;
                read.forEach(([value, quality], i) => readings.set(i, value, quality));
                const value = readings.goodValue(readings.indexOf('yield'));
                const isGood = Number.isFinite(value);
                const output = sequencer.step({
                  tS,
                  dtS,
                  readings,
                  objective: { value, isGood, isValid: isGood && value > 0 },
                  applied: () => position ?? follows.base + follows.dither,
                  held: () => position ?? follows.base,
                });
                for (const { channel, base, dither } of output.requests) {
                  asked += 1;
                  Object.assign(follows, { base, dither });
                  expect(channel).toBe('trim');
                  expect(Math.abs(base)).toBeLessThanOrEqual(10);
                  expect(Math.abs(dither)).toBeLessThanOrEqual(1);
                  expect(Math.abs(base + dither)).toBeLessThanOrEqual(10);
                }
                for (const event of output.events) runEventBodySchema.parse(event);
                for (const result of sequencer.results.values()) expect(Number.isFinite(result)).toBe(true);
                expect(output.end === null).toBe(output.activeSteps.length === 1);
              }
            },
          ),
          { numRuns },
        );
        expect(asked).toBeGreaterThan(5 * numRuns);
      },
      timeoutMs,
    );
  });
}
