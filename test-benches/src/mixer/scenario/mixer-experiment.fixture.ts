import { describe, expect, it } from 'vitest';
import type { ExperimentContent } from '@cresthold/shared';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { mixerBench } from '../mixer-bench.js';
import { mixerEntry } from './mixer-entry.js';

/** Greatest mean loss behind the true best over the last minute, g/L of yield: one percent of what there is. */
const lossAllowed = 0.045;
/** What the climb from rest leaves at least: it stays on a hill that is a fifth lower. */
const lossOfPlain = 0.5;

const entry = mixerEntry({ host: '127.0.0.1', port: 1 });

function run(
  key: string,
  seed: number,
  change: (experiment: ExperimentContent) => ExperimentContent = (e) => e,
) {
  const { rig, envelope, objective, experiment } = shippedDocuments(entry, key);
  return runInVirtualTime({
    definition: mixerBench,
    rig,
    envelope,
    objective,
    experiment: change(experiment),
    seed,
    // The drift stands elsewhere for each.
    warmUpS: 3 + 13 * (seed % 20),
    atMostS: 900,
  });
}

/** The same seek without looking at the hills first: from rest, as a plain climb begins. */
function withoutSurvey({ graph, ...experiment }: ExperimentContent): ExperimentContent {
  const steps = graph.steps.filter(({ id }) => !['survey', 'move', 'settle', 'check'].includes(id));
  const edges = graph.edges.filter(({ from, to }) =>
    [from, to].every((id) => steps.some((s) => s.id === id)),
  );
  const toSeek = { id: 'start-done-seek', from: 'start', port: 'done', to: 'seek' };
  const onward = { id: 'seek-done-finish', from: 'seek', port: 'done', to: 'finish' };
  return { ...experiment, graph: { steps, edges: [...edges, toSeek, onward] } };
}

/** @param seeds how many @param plainSeeds of them for what fails on purpose */
export function describeMixerExperiments(seeds: number, plainSeeds: number): void {
  const all = Array.from({ length: seeds }, (_, i) => i + 1);
  describe.each(['find-yield', 'find-least-waste'])(
    `%s on the mixer, over ${seeds} seeds`,
    { timeout: 20_000 * seeds },
    (key) => {
      it('ends on the highest hill within one percent of the true best, inside the envelope', () => {
        const losses = all.map((seed) => {
          const course = run(key, seed);
          expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
          expect(course.writesOutside).toBe(0);
          expect(course.interventions).toBe(0);
          return meanLossAtEnd(course, 'seek', 60);
        });
        console.info(`${key}: greatest mean loss ${Math.max(...losses).toFixed(4)} g/L over ${seeds} seeds`);
        expect(Math.max(...losses)).toBeLessThan(lossAllowed);
      });

      it('stays on a lower hill without its survey', () => {
        const losses = all
          .slice(0, plainSeeds)
          .map((seed) => meanLossAtEnd(run(key, seed, withoutSurvey), 'seek', 60));
        console.info(`${key} without survey: least mean loss ${Math.min(...losses).toFixed(3)} g/L`);
        expect(Math.min(...losses)).toBeGreaterThan(lossOfPlain);
      });
    },
  );
}
