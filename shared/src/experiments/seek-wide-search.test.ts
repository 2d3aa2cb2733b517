import { describe, expect, it } from 'vitest';
import { testChain, testSeek, type SeekChange } from './experiment.fixture.js';
import { runScript, type Plant } from './scripted-plant.fixture.js';

/** A low hill at −5 with the start on it, and a higher one at 6. */
const twoHills: Plant = ({ trim = NaN }) => ({
  yield: 60 + 20 * Math.exp(-((trim + 5) ** 2) / 4) + 30 * Math.exp(-((trim - 6) ** 2) / 4),
  flame: 1,
});
const visit = { settleS: 0.2, seekS: 0, averageS: 0.5, everyS: null, advantage: 0 };
const end = { afterS: 90, whenConverged: null, when: null };
const seek = (wideSearch: SeekChange['wideSearch'], change: SeekChange = {}) =>
  runScript({
    graph: testChain(testSeek({ wideSearch, gain: 0.05, end, ...change })),
    plant: twoHills,
    start: { trim: -5 },
  });

describe('a wide search', () => {
  it('finds the higher hill, where plain seeking stays on the lower', () => {
    expect(seek(null).results['seek.best.trim']).toBeCloseTo(-5, 1);
    expect(seek({ starts: { by: 'grid', points: 9 }, visit }).results['seek.best.trim']).toBeCloseTo(6, 1);
    const list = { by: 'list' as const, points: [[{ expression: '2 + 3' }], [-2]] };
    expect(seek({ starts: list, visit }).results['seek.best.trim']).toBeCloseTo(6, 1);
  });

  it('seeks from each of a few spread starts before it judges them', () => {
    const run = seek({ starts: { by: 'spread', count: 3 }, visit: { ...visit, seekS: 6 } });
    expect(run.results['seek.best.trim']).toBeCloseTo(6, 1);
  });

  it('moves from point to point at the slew limit, and settles from when it has arrived', () => {
    const run = seek({ starts: { by: 'grid', points: 3 }, visit });
    const asked = run.scans.map(({ applied }) => applied['trim'] ?? NaN);
    const steps = asked.slice(1).map((value, i) => Math.abs(value - (asked[i] ?? NaN)));
    // 1000 % a second in 50 ms.
    expect(Math.max(...steps)).toBeLessThanOrEqual(50);
    expect(run.sequencer.signalNames).toContain('seek.searchPhase');
  });

  it('leaves the best of what it has judged where its time is over on its way round', () => {
    const run = seek(
      { starts: { by: 'list', points: [[-8], [6.5], [0], [9]] }, visit: { ...visit, averageS: 1 } },
      { end: { ...end, afterS: 4.2 } },
    );
    expect(run.results['seek.best.trim']).toBe(6.5);
  });

  it('looks around again and follows the best to another hill', () => {
    const drifting: Plant = (applied, tS) =>
      twoHills({ trim: tS < 40 ? (applied['trim'] ?? NaN) : -(applied['trim'] ?? NaN) + 1 }, tS);
    const run = runScript({
      graph: testChain(
        testSeek({
          wideSearch: { starts: { by: 'grid', points: 9 }, visit: { ...visit, everyS: 30 } },
          gain: 0.05,
          end: { ...end, afterS: 120 },
        }),
      ),
      plant: drifting,
      start: { trim: -5 },
    });
    // The higher hill, at 6 first, is mirrored to −5.
    expect(run.results['seek.best.trim']).toBeCloseTo(-5, 1);
  });
});
