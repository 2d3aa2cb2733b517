import { describe, expect, it } from 'vitest';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { pulserBench } from '../pulser-bench.js';
import { pulserEntry } from './pulser-entry.js';

/** Greatest mean loss of clean energy over the last minute, mJ: two percent of what there is. */
const lossAllowedMJ = 2.2;

const entry = pulserEntry({ host: '127.0.0.1', port: 1 });

function run(key: string, seed: number) {
  return runInVirtualTime({
    definition: pulserBench,
    ...shippedDocuments(entry, key),
    seed,
    // Lamp and rod stand elsewhere for each, by phases of their seed and by when the run begins.
    warmUpS: 3 + 13 * (seed % 20),
    atMostS: 600,
  });
}

/** @param seeds how many @param temptedSeeds on how many of them energy alone is sought */
export function describePulserExperiments(seeds: number, temptedSeeds: number): void {
  const all = Array.from({ length: seeds }, (_, i) => i + 1);
  describe(`the experiments of the pulser, over ${seeds} seeds`, { timeout: 20_000 * seeds }, () => {
    it('hold the best clean pulse to two percent, inside the envelope', () => {
      const losses = all.map((seed) => {
        const course = run('find-pulse', seed);
        expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
        expect([course.writesOutside, course.interventions, course.trip]).toEqual([0, 0, null]);
        return meanLossAtEnd(course, 'seek', 60);
      });
      console.info(`pulser: greatest mean loss ${Math.max(...losses).toFixed(2)} mJ over ${seeds} seeds`);
      expect(Math.max(...losses)).toBeLessThan(lossAllowedMJ);
    });

    it('go over the cliff by energy alone, where only the interlock stops them', () => {
      for (const seed of all.slice(0, temptedSeeds)) {
        const course = run('seek-energy', seed);
        expect(course.trip).toBe('interlock:energy-high');
        expect(course.writesOutside).toBe(0);
        const worst = Math.max(...course.moments.map(({ loss }) => loss ?? 0).slice(-40));
        expect(worst).toBeGreaterThan(10 * lossAllowedMJ);
        // The interlock was in time for the optics.
        expect(course.bench.model.read('protectionTrip')).toBe(0);
      }
    });
  });
}
