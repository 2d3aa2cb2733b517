import type { ExperimentContent } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { burnerBench } from '../burner-bench.js';
import { burnerEntry } from './burner-entry.js';

/** Greatest mean loss of efficiency over the last two minutes of bench time, points. */
const lossAllowed = 0.1;

const shipped = shippedDocuments(burnerEntry({ host: '127.0.0.1', port: 1 }));

function run(seed: number, change: Partial<typeof shipped> = {}) {
  return runInVirtualTime({
    definition: burnerBench,
    ...shipped,
    ...change,
    seed,
    // The drift has a period of 240 s of real time: each seed begins elsewhere in it.
    warmUpS: 3 + 12 * (seed % 20),
    atMostS: 600,
  });
}

/** Wants oxygen low, as a trim without CO does: less air is always better by it. */
function byOxygenAlone(): Partial<typeof shipped> {
  if (!shipped.objective) throw new Error('The burner ships with an objective.');
  const [flame] = shipped.objective.validity;
  return {
    objective: { ...shipped.objective, expression: '-o2', unit: '%', validity: flame ? [flame] : [] },
    experiment: withGain(shipped.experiment, 2),
  };
}

/** Oxygen changes ten times as much as efficiency: the gain goes down so that the loop is as fast as before. */
function withGain({ graph, ...experiment }: ExperimentContent, gain: number): ExperimentContent {
  const steps = graph.steps.map((step) =>
    step.kind !== 'seek'
      ? step
      : {
          ...step,
          parameters: {
            ...step.parameters,
            actuators: step.parameters.actuators.map((actuator) => ({ ...actuator, gain })),
          },
        },
  );
  return { ...experiment, graph: { ...graph, steps } };
}

/** @param seeds how many @param temptedSeeds on how many of them oxygen alone is sought */
export function describeBurnerExperiment(seeds: number, temptedSeeds: number): void {
  const all = Array.from({ length: seeds }, (_, i) => i + 1);
  describe(`the experiment of the burner, over ${seeds} seeds`, { timeout: 20_000 * seeds }, () => {
    it('holds the best air trim to a tenth of a point, inside the envelope', () => {
      const losses = all.map((seed) => {
        const course = run(seed);
        expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
        expect([course.writesOutside, course.interventions, course.trip]).toEqual([0, 0, null]);
        return meanLossAtEnd(course, 'seek', 24);
      });
      console.info(`burner: greatest mean loss ${Math.max(...losses).toFixed(4)} points over ${seeds} seeds`);
      expect(Math.max(...losses)).toBeLessThan(lossAllowed);
    });

    it('goes over the CO cliff by oxygen alone, as far as interlock and box let it', () => {
      for (const seed of all.slice(0, temptedSeeds)) {
        const course = run(seed, byOxygenAlone());
        const worst = Math.max(...course.moments.map(({ loss }) => loss ?? 0));
        expect(worst).toBeGreaterThan(10 * lossAllowed);
        expect([null, 'interlock:co-high']).toContain(course.trip);
        expect(course.writesOutside).toBe(0);
      }
    });
  });
}
