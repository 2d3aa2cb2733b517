import { describe, expect, it } from 'vitest';
import { papers, type SchemeName } from './papers.js';

type Triple = [number, number, number];

/**
 * Full-severity matrices on linear RGB by Machado, Oliveira & Fernandes (2009), "A physiologically-based model
 * for simulation of color vision deficiency", from memory.
 */
const deficiencies: Record<string, [Triple, Triple, Triple]> = {
  protanopia: [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  deuteranopia: [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  tritanopia: [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};

const times = (matrix: [Triple, Triple, Triple], [a, b, c]: Triple): Triple =>
  matrix.map(([x, y, z]) => x * a + y * b + z * c) as Triple;

function linear(hex: string): Triple {
  return [1, 3, 5].map((at) => {
    const c = parseInt(hex.slice(at, at + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  }) as Triple;
}

/** CIE 1976 L*a*b* of linear sRGB under D65. */
function lab(rgb: Triple): Triple {
  const clipped = rgb.map((c) => Math.min(1, Math.max(0, c))) as Triple;
  const [x, y, z] = times(
    [
      [0.4124, 0.3576, 0.1805],
      [0.2126, 0.7152, 0.0722],
      [0.0193, 0.1192, 0.9505],
    ],
    clipped,
  );
  const f = (t: number) => (t > (6 / 29) ** 3 ? Math.cbrt(t) : t / (3 * (6 / 29) ** 2) + 4 / 29);
  const [fx, fy, fz] = [f(x / 0.95047), f(y), f(z / 1.08883)];
  return [116 * fy - 16, 500 * (fx - fy), 200 * (fy - fz)];
}

const distance = (a: Triple, b: Triple) => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

it('finds white and red where the standard has them', () => {
  expect(lab([1, 1, 1])[0]).toBeCloseTo(100, 1);
  expect(lab(linear('#ff0000')).map(Math.round)).toEqual([53, 80, 67]);
});

/** Far above what is just seen side by side (about 2), since thin lines show their colour poorly. */
const leastDistance = 20;

describe.each(['light', 'dark'] as SchemeName[])('the traces on the %s paper', (name) => {
  it.each(Object.keys(deficiencies))('are told apart with %s', (kind) => {
    const seen = papers[name].traces.map((hex) =>
      lab(times(deficiencies[kind] as [Triple, Triple, Triple], linear(hex))),
    );
    for (const [index, colour] of seen.entries()) {
      for (const other of seen.slice(index + 1))
        expect(distance(colour, other)).toBeGreaterThan(leastDistance);
    }
  });
});
