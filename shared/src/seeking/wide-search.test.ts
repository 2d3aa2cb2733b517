import { describe, expect, it } from 'vitest';
import { gradientLaw } from './gradient-law.js';
import { settled } from './law.fixture.js';
import { createSeededUniform, nextUniform } from './seeded-uniform.js';
import { simulateSeeking } from './simulate-seeking.fixture.js';
import { gridStarts, spreadStarts } from './spread-starts.js';
import { wideSearch, type Visit } from './wide-search.js';

/** The workspace compiles without the types of any platform; the runner of the tests has it. */
declare const console: { info(text: string): void };

/** u⁴ + u³ − 2u² − 3u has its least value −3 at 1, a local least value 1 at −1 and a crest at −0.75. */
const quartic = (u: number) => u ** 4 + u ** 3 - 2 * u ** 2 - 3 * u;

const box = { min: -2.2, max: 2 };
const law = (change: Record<string, number> = {}) =>
  settled(gradientLaw, [{ ...box, amplitude: 0.1, periodS: 0.5, gain: 0.08, ...change }], {
    lowPassRatio: 1,
  });

interface Hill {
  start: number;
  seed?: number;
  noise?: number;
  visit?: Partial<Visit> | null;
  forS?: number;
  /** Shift of the map as a function of time: which hill is the higher one changes. */
  tilt?: (tS: number) => number;
}

const noVisit = { starts: [[0]], settleS: 0, seekS: 0, averageS: 0.1, everyS: null, advantage: 0 };

/** Ends of a seek on the quartic, with seeded noise, in the order of its periods. */
function seek({ start, seed = 1, noise = 0, visit = null, forS = 60, tilt = () => 0 }: Hill): number[] {
  const random = createSeededUniform(seed);
  const common = {
    start: [start],
    map: ([u = NaN]: readonly number[], tS: number) =>
      -quartic(u) + tilt(tS) * u + noise * Math.sqrt(12) * (nextUniform(random) - 0.5),
    periodS: 0.5,
    stepsPerPeriod: 25,
    periods: forS / 0.5,
  };
  const means =
    visit === null
      ? simulateSeeking({ ...common, law: gradientLaw, parameters: law() })
      : simulateSeeking({
          ...common,
          law: wideSearch(gradientLaw),
          parameters: { law: law(), visit: { ...noVisit, ...visit } },
        });
  return means.map(([mean = NaN]) => mean);
}

const survey = { starts: gridStarts([box], 15), settleS: 0.1, averageS: 0.2 };

describe('seeking on two hills', () => {
  it('ends on the hill of its start: from 0 on the higher one, from −1.5 on the lower', () => {
    // The function, its least value −3 and the trap at −1.5 are the example of a control design library's manual
    // (amplitude 0.1, 300 s), from memory; its extrema follow from h' = 4u³ + 3u² − 4u − 3 = (u² − 1)(4u + 3).
    for (const u of [1, -1, -0.75]) expect(4 * u ** 3 + 3 * u ** 2 - 4 * u - 3).toBeCloseTo(0, 12);
    expect([quartic(1), quartic(-1), quartic(-0.75)]).toEqual([-3, 1, 1.01953125]);
    expect(quartic(seek({ start: 0 }).at(-1) ?? NaN)).toBeCloseTo(-3, 2);
    expect(seek({ start: -1.5, forS: 300 }).at(-1)).toBeLessThan(-0.9);
  });

  it('never reaches the higher hill from the wrong basin without a survey, always with one', () => {
    let plain = 0;
    let surveyed = 0;
    for (let seed = 1; seed <= 100; seed += 1) {
      const random = createSeededUniform(1000 + seed);
      const start = -1.8 + 0.8 * nextUniform(random);
      const hill = { start, seed, noise: 0.02, forS: 30 };
      if (Math.abs((seek(hill).at(-1) ?? NaN) - 1) < 0.05) plain += 1;
      if (Math.abs((seek({ ...hill, visit: survey }).at(-1) ?? NaN) - 1) < 0.05) surveyed += 1;
    }
    console.info(
      `higher hill reached from the wrong basin: ${plain} of 100 plain, ${surveyed} of 100 surveyed`,
    );
    expect(plain).toBe(0);
    expect(surveyed).toBe(100);
  });

  it('reaches it by multi-start from a few starts', () => {
    const visit = { starts: spreadStarts([box], 3), settleS: 0.1, seekS: 5, averageS: 0.2 };
    const means = seek({ start: -1.5, visit, forS: 60 });
    expect(means.at(-1)).toBeCloseTo(1, 1);
  });

  it('changes over when the other hill becomes the higher one, if it surveys again', () => {
    // From 40 s on the loss is u⁴ + u³ − 2u² − u/2: −2.12 at −1.40, −0.76 at 0.77.
    const tilt = (tS: number) => (tS < 40 ? 0 : -2.5);
    const hill: Hill = { start: -1.5, tilt, forS: 110 };
    const once = seek({ ...hill, visit: survey });
    const again = seek({ ...hill, visit: { ...survey, everyS: 20 } });
    expect(once[70]).toBeCloseTo(1, 1);
    expect(once.at(-1)).toBeGreaterThan(0);
    expect(again.at(-1)).toBeLessThan(-1);
  });

  it('stays where it is unless another point is better by the advantage', () => {
    const visit = { ...survey, advantage: 10 };
    expect(seek({ start: -1.5, visit, forS: 60 }).at(-1)).toBeLessThan(-0.8);
  });
});

describe('a wide search', () => {
  it('leaves points without a valid objective and does not choose them', () => {
    const search = wideSearch(gradientLaw);
    const visited = new Set<number>();
    const parameters = { law: law(), visit: { ...noVisit, ...survey } };
    const means = simulateSeeking({
      law: search,
      parameters,
      start: [-1.5],
      map: ([u = NaN]) => u,
      periodS: 0.5,
      stepsPerPeriod: 25,
      periods: 100,
      // More is better up to the cliff at 0.7.
      tell: (input, [u = NaN]) => (input.isValid = u < 0.7),
      watch: ({ estimate }) => visited.add(Math.round((estimate[0] ?? NaN) * 10) / 10),
    });
    expect(visited.has(1.9)).toBe(true);
    expect(means.at(-1)?.[0]).toBeLessThan(0.7);
    expect(means.at(-1)?.[0]).toBeGreaterThan(0);
  });

  it('tells what it does in its signals', () => {
    const search = wideSearch(gradientLaw);
    expect(search.signalNames(1).slice(-3)).toEqual(['searchPhase', 'searchPoint', 'bestScore']);
    const state = search.init({ law: law(), visit: { ...noVisit, ...survey } }, [-1.5]);
    expect(state.signals.length).toBe(search.signalNames(1).length);
  });
});

describe('starts', () => {
  it('cover the box as a grid whose neighbours follow each other', () => {
    const unit = { min: 0, max: 10 };
    expect(gridStarts([unit], 3)).toEqual([[0], [5], [10]]);
    expect(gridStarts([unit, unit], 2)).toEqual([
      [0, 0],
      [0, 10],
      [10, 10],
      [10, 0],
    ]);
  });

  it('spread by the sequence of J. H. Halton (1960)', () => {
    // Base 2: 1/2, 1/4, 3/4, 1/8; base 3: 1/3, 2/3, 1/9, 4/9.
    const starts = spreadStarts(
      [
        { min: 0, max: 8 },
        { min: 0, max: 9 },
      ],
      4,
    );
    starts.forEach(([u, v], k) => {
      expect(u).toBeCloseTo([4, 2, 6, 1][k] ?? NaN, 12);
      expect(v).toBeCloseTo([3, 6, 1, 4][k] ?? NaN, 12);
    });
  });
});
