import { dynamicEfficiency, type ExperimentContent } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { stringBench } from '../string-bench.js';
import { stringEntry } from './string-entry.js';

/** Share of the energy that was to be had. */
const efficiencyWanted = 0.98;
const entry = stringEntry({ path: '/dev/null' });

/** Runs an experiment that ships, with its graph changed or as it is. */
export function run(key: string, profile: string, seed: number, graphOf = (graph: Graph) => graph) {
  const { rig, envelope, objective, experiment } = shippedDocuments(entry, key);
  return runInVirtualTime({
    definition: stringBench,
    rig,
    envelope,
    objective,
    experiment: { ...experiment, graph: graphOf(experiment.graph) },
    seed,
    own: { profile },
    atMostS: 8000,
  });
}

type Graph = ExperimentContent['graph'];
type Course = ReturnType<typeof run>;

/** Dynamic efficiency over a step after EN 50530, by what the bench tells nobody but its log. */
export function efficiencyOf(course: Course, step: string): number {
  const during = course.moments.filter(({ steps }) => steps.includes(step));
  return dynamicEfficiency({
    // Volts of one: only the product counts.
    voltages: during.map(() => 1),
    currents: during.map(({ bestObjective, loss }) => bestObjective - (loss ?? NaN)),
    availablePowers: during.map(({ bestObjective }) => bestObjective),
    durationsS: during.map(() => course.bench.scanS),
  });
}

/** Share of the power that was to be had over the last twenty seconds of a step. */
function shareHeld(course: Course, step: string): number {
  const bestW = course.moments.at(-1)?.bestObjective ?? NaN;
  return 1 - meanLossAtEnd(course, step, 20) / bestW;
}

type SeekParameters = Extract<Graph['steps'][number], { kind: 'seek' }>['parameters'];

/** The same experiment with another seek, over all of the envelope instead of a box round the knee. */
export function withSeek(graph: Graph, change: (seek: SeekParameters) => Partial<SeekParameters>): Graph {
  const steps = graph.steps.map((step): Graph['steps'][number] =>
    step.kind === 'seek' ? { ...step, parameters: { ...step.parameters, ...change(step.parameters) } } : step,
  );
  return { ...graph, steps };
}

const plain = { min: null, max: null, dither: null, measuredChannel: null };

/** A sine of two volts in two seconds, injected: power that clouds take or give falls into its band. */
const injecting = (graph: Graph) =>
  withSeek(graph, ({ actuators }) => ({
    actuators: actuators.map((actuator) => ({ ...actuator, ...plain, amplitude: 2, periodS: 2 })),
  }));

/** Two volts each fifth of a second, as fast as the light changes. */
const perturbing = (graph: Graph) =>
  withSeek(graph, ({ actuators }) => ({
    law: { id: 'perturb-observe', parameters: { dwellS: 0.2, settleS: 0.05, taper: null } },
    actuators: actuators.map((actuator) => ({ ...actuator, ...plain, amplitude: 2 })),
  }));

/** A minute is enough where the light stands still. */
const forAMinute = (graph: Graph) => withSeek(graph, ({ end }) => ({ end: { ...end, afterS: 60 } }));

const report = (what: string, shares: number[]) =>
  console.info(
    `${what}: ${(100 * Math.min(...shares)).toFixed(2)} to ${(100 * Math.max(...shares)).toFixed(2)} % of what was to be had, over ${shares.length} seeds`,
  );

/** Finished and passed, with nothing outside the envelope by the bench's own word and nothing for the guard to do. */
function expectOrderly(course: Course): void {
  expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
  expect(course.writesOutside).toBe(0);
  expect(course.interventions).toBe(0);
}

/** @param seeds how many @param plainSeeds of them for what fails on purpose in the clouds */
export function describeStringExperiments(seeds: number, plainSeeds: number): void {
  const all = Array.from({ length: seeds }, (_, i) => i + 1);

  describe(`the string in broken cloud, over ${seeds} seeds`, { timeout: 30_000 * seeds }, () => {
    it('gives 98 % of the energy that was to be had, by its own ripple', () => {
      const shares = all.map((seed) => {
        const course = run('hold-by-ripple', 'cloud', seed);
        expectOrderly(course);
        return efficiencyOf(course, 'seek');
      });
      report('by the ripple in broken cloud', shares);
      expect(Math.min(...shares)).toBeGreaterThan(efficiencyWanted);
    });

    it.each([
      ['perturb and observe, which takes the clouds for its own doing', perturbing],
      ['an injected dither that is slow beside the clouds', injecting],
    ])('gives less by %s', (what, change) => {
      const some = all.slice(0, plainSeeds);
      const shares = some.map((seed) => efficiencyOf(run('hold-by-ripple', 'cloud', seed, change), 'seek'));
      report(what, shares);
      const mean = shares.reduce((sum, share) => sum + share, 0) / shares.length;
      expect(mean).toBeLessThan(efficiencyWanted);
    });
  });

  describe(`the string in partial shade, over ${seeds} seeds`, { timeout: 30_000 * seeds }, () => {
    it('ends on the highest of its peaks', () => {
      const shares = all.map((seed) => {
        const course = run('find-highest-peak', 'shade', seed);
        expectOrderly(course);
        return shareHeld(course, 'seek');
      });
      report('highest peak in partial shade', shares);
      expect(Math.min(...shares)).toBeGreaterThan(efficiencyWanted);
    });

    it('ends on a lower one, more often than not, when it climbs from the knee without looking first', () => {
      const shares = all.map((seed) => shareHeld(run('hold-by-ripple', 'shade', seed, forAMinute), 'seek'));
      report('plain climb in partial shade', shares);
      const missed = shares.filter((share) => share < 0.95).length;
      console.info(`plain climb missed the highest peak in ${missed} of ${seeds}`);
      expect(missed).toBeGreaterThan(seeds / 2);
    });
  });
}
