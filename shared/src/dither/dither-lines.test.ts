import { describe, expect, it } from 'vitest';
import { ditherConflicts, ditherLines } from './dither-lines.js';

/** Mean over the common period of all, which is 1 s for whole frequencies in Hz. */
function meanOf(value: (t: number) => number): number {
  const samples = 4096;
  let sum = 0;
  for (let i = 0; i < samples; i += 1) sum += value(i / samples);
  return sum / samples;
}
const wave =
  (hz: number, phase = 0) =>
  (t: number) =>
    Math.sin(2 * Math.PI * hz * t + phase);

interface Dither {
  hz: number;
  a: number;
  phase?: number;
}

/** ⟨M_i·y⟩ with the objective as a function of the dithers alone. */
function gradient(dithers: Dither[], i: number, map: (...x: number[]) => number): number {
  const { hz, a, phase = 0 } = dithers[i] as Dither;
  return meanOf((t) => {
    const x = dithers.map((d) => d.a * wave(d.hz, d.phase ?? 0)(t));
    return (2 / a) * wave(hz, phase)(t) * map(...x);
  });
}

/** ⟨N_ij·y⟩ */
function hessian(dithers: Dither[], i: number, j: number, map: (...x: number[]) => number): number {
  const [p, q] = [dithers[i] as Dither, dithers[j] as Dither];
  return meanOf((t) => {
    const x = dithers.map((d) => d.a * wave(d.hz, d.phase ?? 0)(t));
    const [s, r] = [wave(p.hz)(t), wave(q.hz)(t)];
    const n = i === j ? (16 / p.a ** 2) * (s * s - 0.5) : (4 / (p.a * q.a)) * s * r;
    return n * map(...x);
  });
}

const conflicts = (multiples: number[], law: 'gradient' | 'newton') =>
  ditherConflicts(ditherLines(multiples, law), 1);

// The amounts are derived in the docstring of ditherLines, from products of sines; none is published as a number.
describe('a gradient whose conditions are violated is biased by the amount derived', () => {
  it('one frequency twice: f_j·a_j/a_i', () => {
    const two = [
      { hz: 5, a: 0.2 },
      { hz: 5, a: 0.3 },
    ];
    expect(gradient(two, 0, (x = 0, y = 0) => 4 * x + 7 * y)).toBeCloseTo(4 + (7 * 0.3) / 0.2, 10);
    expect(conflicts([5, 5], 'gradient')).not.toHaveLength(0);
  });

  it('second harmonic: −f_jj·a_j²/(4a_i)·sin(φ_i − 2φ_j), and none where all start together', () => {
    const map = (x = 0, y = 0) => 4 * x + (6 / 2) * y * y;
    const at = (phase: number) =>
      gradient(
        [
          { hz: 10, a: 0.2, phase },
          { hz: 5, a: 0.3 },
        ],
        0,
        map,
      );
    expect(at(0)).toBeCloseTo(4, 10);
    expect(at(0.7)).toBeCloseTo(4 - ((6 * 0.3 ** 2) / (4 * 0.2)) * Math.sin(0.7), 10);
    expect(conflicts([5, 10], 'gradient')).not.toHaveLength(0);
  });

  it.each([
    ['sum', 12, -1],
    ['difference', 2, 1],
  ])('%s of two: ∓f_jk·a_j·a_k/(2a_i)·sin(…)', (_, hz, sign) => {
    const map = (x = 0, y = 0, z = 0) => 4 * x + 5 * y * z;
    const at = (phase: number) =>
      gradient(
        [
          { hz, a: 0.2, phase },
          { hz: 7, a: 0.3 },
          { hz: 5, a: 0.4 },
        ],
        0,
        map,
      );
    expect(at(0)).toBeCloseTo(4, 10);
    expect(at(0.7)).toBeCloseTo(4 + sign * ((5 * 0.3 * 0.4) / (2 * 0.2)) * Math.sin(0.7), 10);
    expect(conflicts([hz, 7, 5], 'gradient')).not.toHaveLength(0);
  });

  it('third harmonic: −f_jjj·a_j³/(24a_i), even where all start together', () => {
    const two = [
      { hz: 15, a: 0.2 },
      { hz: 5, a: 0.5 },
    ];
    const biased = gradient(two, 0, (x = 0, y = 0) => 4 * x + (9 / 6) * y ** 3);
    expect(biased).toBeCloseTo(4 - (9 * 0.5 ** 3) / (24 * 0.2), 10);
    expect(conflicts([5, 15], 'gradient')).not.toHaveLength(0);
  });
});

describe('a Hessian whose conditions are violated is biased by the amount derived', () => {
  const cross =
    (f: number, j: number, k: number) =>
    (...x: number[]) =>
      f * (x[j] ?? 0) * (x[k] ?? 0);

  it.each([
    ['sum', 9, 1],
    ['difference', 1, -1],
  ])(
    '2ω_i is the %s of two others: ±2·f_jk·a_j·a_k/a_i² on H_ii, ±f_ii·a_i²/(4a_j·a_k) on H_jk',
    (_, sum, sign) => {
      // 2·f1 = 10 = 9 + 1 or 11 − 1.
      const second = sign === 1 ? sum : 11;
      const three = [
        { hz: 5, a: 0.2 },
        { hz: second, a: 0.3 },
        { hz: 1, a: 0.4 },
      ];
      expect(hessian(three, 0, 0, cross(6, 1, 2))).toBeCloseTo((sign * 2 * 6 * 0.3 * 0.4) / 0.2 ** 2, 9);
      const square = (x = 0) => (8 / 2) * x * x;
      expect(hessian(three, 1, 2, square)).toBeCloseTo((sign * 8 * 0.2 ** 2) / (4 * 0.3 * 0.4), 9);
      expect(conflicts([5, second, 1], 'newton')).not.toHaveLength(0);
    },
  );

  it('a frequency three times another: −2·f_ij·a_j/a_i on H_ii', () => {
    const two = [
      { hz: 5, a: 0.2 },
      { hz: 15, a: 0.3 },
    ];
    expect(hessian(two, 0, 0, cross(6, 0, 1))).toBeCloseTo((-2 * 6 * 0.3) / 0.2, 9);
  });

  it.each([
    // ω1 + ω2 = ω3 + ω4, then ω1 + ω2 = ω3 − ω4, then ω3 = 2ω1 + ω2.
    [[3, 11, 6, 8], 2, 3, 1],
    [[3, 11, 20, 6], 2, 3, -1],
    [[3, 11, 17], 2, 0, -1],
  ])('frequencies %j: ±f_kl·a_k·a_l/(2a_i·a_j) on H_12', (frequencies, k, l, sign) => {
    const dithers = frequencies.map((hz, i) => ({ hz, a: 0.2 + 0.1 * i }));
    const [ai, aj, ak, al] = [0, 1, k, l].map((i) => dithers[i]?.a ?? NaN) as [
      number,
      number,
      number,
      number,
    ];
    const biased = hessian(dithers, 0, 1, cross(6, k, l));
    expect(biased).toBeCloseTo((sign * 6 * ak * al) / (2 * ai * aj), 9);
    expect(conflicts(frequencies, 'newton')).not.toHaveLength(0);
  });

  it('a frequency that is the double or the sum of others: a share of its slope once it lags', () => {
    const at = (phase: number) =>
      hessian(
        [
          { hz: 5, a: 0.2 },
          { hz: 10, a: 0.3, phase },
        ],
        0,
        0,
        (_, y = 0) => 7 * y,
      );
    expect(at(0)).toBeCloseTo(0, 10);
    expect(at(0.7)).toBeCloseTo(((-4 * 7 * 0.3) / 0.2 ** 2) * Math.sin(0.7), 9);
  });
});

describe('dithers whose conditions hold', () => {
  it('give slope and Hessian exactly on a quadratic, whatever their phases', () => {
    const three = [
      { hz: 31, a: 0.2, phase: 0 },
      { hz: 37, a: 0.3, phase: 0 },
      { hz: 47, a: 0.4, phase: 0 },
    ];
    expect(conflicts([31, 37, 47], 'newton')).toHaveLength(0);
    const map = (x = 0, y = 0, z = 0) => 4 * x - y + 2 * z + x * x + 3 * x * y + 5 * y * z - 2 * z * z;
    expect([0, 1, 2].map((i) => gradient(three, i, map))).toEqual(
      [4, -1, 2].map((slope) => expect.closeTo(slope, 9) as number),
    );
    const expected = [
      [2, 3, 0],
      [3, 0, 5],
      [0, 5, -4],
    ];
    expected.forEach((row, i) =>
      row.forEach((value, j) => expect(hessian(three, i, j, map)).toBeCloseTo(value, 8)),
    );
  });
});
