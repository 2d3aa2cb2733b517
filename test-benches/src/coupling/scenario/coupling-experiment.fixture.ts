import type { ExperimentContent } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { couplingBench } from '../coupling-bench.js';
import { couplingEntry } from './coupling-entry.js';

/** Greatest mean loss behind the true best over the last half minute, dB. */
const lossAllowedDb = 0.2;
/** What is lost on the first ring, dB. */
const lossOnRingDb = 9;
/** In the middle of the first hold, s of bench time. */
const bumpAtS = 140;

const { rig, envelope, objective, experiment } = shippedDocuments(couplingEntry({ path: '/dev/null' }));

function run(seed: number, isBumped: boolean, graph: ExperimentContent['graph'] = experiment.graph) {
  return runInVirtualTime({
    definition: couplingBench,
    rig,
    envelope,
    objective,
    experiment: { ...experiment, graph },
    seed,
    faults: isBumped ? [{ kind: 'bump', of: null, fromS: bumpAtS, untilS: Infinity }] : [],
    atMostS: 600,
  });
}

/** Only these of the shipped steps, one after the other. */
function onlySteps(...ids: string[]): ExperimentContent['graph'] {
  const way = ['start', ...ids, 'finish'];
  const steps = experiment.graph.steps.filter(({ id }) => way.includes(id));
  const edges = way.slice(1).map((to, i) => ({ id: `to-${to}`, from: way[i] ?? '', port: 'done', to }));
  return { steps, edges };
}

/** @param seeds how many @param plainSeeds of them for what fails on purpose */
export function describeCouplingExperiment(seeds: number, plainSeeds: number): void {
  const all = Array.from({ length: seeds }, (_, i) => i + 1);
  const some = all.slice(0, plainSeeds);
  const report = (what: string, losses: number[]) =>
    console.info(
      `${what}: mean loss ${Math.min(...losses).toFixed(3)} to ${Math.max(...losses).toFixed(3)} dB over ${losses.length} seeds`,
    );

  describe(`the experiment of the coupling, over ${seeds} seeds`, { timeout: 20_000 * seeds }, () => {
    it('holds the peak, and finds it again after a bump, inside the envelope', () => {
      const held: number[] = [];
      const again: number[] = [];
      for (const seed of all) {
        const course = run(seed, true);
        expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
        expect(course.writesOutside).toBe(0);
        expect(course.interventions).toBe(0);
        const bumped = course.moments.filter(({ tS }) => tS < bumpAtS - 5);
        held.push(meanLossAtEnd({ ...course, moments: bumped }, 'hold', 30));
        again.push(meanLossAtEnd(course, 'holdAgain', 30));
      }
      report('before the bump', held);
      report('after it', again);
      expect(Math.max(...held, ...again)).toBeLessThan(lossAllowedDb);
    });

    it('stays on a ring without looking first', () => {
      const losses = some.map((seed) =>
        meanLossAtEnd(run(seed, false, onlySteps('holdAgain')), 'holdAgain', 30),
      );
      report('plain climb', losses);
      expect(Math.min(...losses)).toBeGreaterThan(lossOnRingDb);
    });

    it('stays on a ring after most bumps without looking again', () => {
      const graph = onlySteps('find', 'holdAgain');
      const losses = some.map((seed) => meanLossAtEnd(run(seed, true, graph), 'holdAgain', 30));
      report('bumped, without looking again', losses);
      // Where the bump itself, as the filters see it, kicks the estimate back over the dark it has been lucky.
      const stranded = losses.filter((loss) => loss > lossOnRingDb).length;
      console.info(`stranded on a ring after ${stranded} of ${plainSeeds} bumps`);
      expect(stranded).toBeGreaterThan(0.7 * plainSeeds);
    });
  });
}
