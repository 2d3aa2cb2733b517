import type { ExperimentContent } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { matcherBench } from '../matcher-bench.js';
import { matcherEntry } from './matcher-entry.js';
import { matcherSeeking } from './matcher-experiment.js';

/** Greatest mean loss of delivered power over the last minute, W: half a percent of what the generator gives. */
const lossAllowedW = 5;
/** What the plain gradient leaves at least, in multiples of what Newton leaves for the same seed. */
const plainAtLeast = 5;

const shipped = shippedDocuments(matcherEntry({ host: '127.0.0.1', port: 1 }));

function run(seed: number, experiment: ExperimentContent = shipped.experiment) {
  return runInVirtualTime({
    definition: matcherBench,
    ...shipped,
    experiment,
    seed,
    // The load stands elsewhere for each, by phases of its seed and by when the run begins.
    warmUpS: 3 + 13 * (seed % 20),
    atMostS: 600,
  });
}

/** The same run by the gradient law with the one gain that the steeper capacitor bears at the same rate. */
function byPlainGradient({ graph, ...experiment }: ExperimentContent): ExperimentContent {
  const { rate, washoutRatio, lowPassRatio } = matcherSeeking.law.parameters;
  const gain = rate / matcherSeeking.actuators[1].own.curvature;
  const steps = graph.steps.map((step) =>
    step.kind !== 'seek'
      ? step
      : {
          ...step,
          parameters: {
            ...step.parameters,
            law: { id: 'gradient' as const, parameters: { washoutRatio, lowPassRatio, taper: null } },
            actuators: step.parameters.actuators.map((actuator) => ({ ...actuator, gain, own: {} })),
          },
        },
  );
  return { ...experiment, graph: { ...graph, steps } };
}

/** @param seeds how many @param plainSeeds on how many of them the plain gradient is tried */
export function describeMatcherExperiment(seeds: number, plainSeeds: number): void {
  const all = Array.from({ length: seeds }, (_, i) => i + 1);
  describe(`the experiment of the matcher, over ${seeds} seeds`, { timeout: 20_000 * seeds }, () => {
    const newton = new Map<number, number>();

    it('holds the match of a wandering load to half a percent of the power, inside the envelope', () => {
      for (const seed of all) {
        const course = run(seed);
        expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
        expect([course.writesOutside, course.interventions]).toEqual([0, 0]);
        newton.set(seed, meanLossAtEnd(course, 'seek', 60));
      }
      console.info(
        `matcher: greatest mean loss ${Math.max(...newton.values()).toFixed(2)} W, ${seeds} seeds`,
      );
      expect(Math.max(...newton.values())).toBeLessThan(lossAllowedW);
    });

    it('does not get along its valley by a plain gradient', () => {
      const plain = all
        .slice(0, plainSeeds)
        .map((seed) => meanLossAtEnd(run(seed, byPlainGradient(shipped.experiment)), 'seek', 60));
      console.info(`matcher by a plain gradient: least mean loss ${Math.min(...plain).toFixed(1)} W`);
      plain.forEach((lossW, i) => expect(lossW).toBeGreaterThan(plainAtLeast * (newton.get(i + 1) ?? NaN)));
    });
  });
}
