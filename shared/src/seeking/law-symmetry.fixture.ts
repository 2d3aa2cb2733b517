import fc from 'fast-check';
import { expect } from 'vitest';
import { lawCaseAt, lawCases, settled } from './law.fixture.js';
import { newtonLaw } from './newton-law.js';
import type { SeekingInput } from './seeking-law.js';

/** Path of the Newton law on a quadratic of its own curvature, seen through a scale of the objective. */
function newtonPath(curvatures: number[], start: number[], scale: number): Float64Array {
  const parameters = settled(
    newtonLaw,
    curvatures.map((curvature, i) => ({
      periodS: 1 / (1 + 0.27 * i),
      curvature: 2 * curvature * scale,
      min: -10,
      max: 10,
    })),
    { rate: 0.3, inverseRate: 0.3 },
  );
  const state = newtonLaw.init(parameters, start);
  const applied = [...start];
  const input: SeekingInput = { objective: NaN, isValid: true };
  for (let i = 0; i < 400; i += 1) {
    const loss = applied.reduce((sum, x, k) => sum + ((curvatures[k] ?? NaN) * x * x) / 2, 0);
    input.objective = -scale * loss;
    newtonLaw.step(state, input, 0.025);
    for (let k = 0; k < applied.length; k += 1) {
      applied[k] = (state.estimate[k] ?? NaN) + (state.dither[k] ?? NaN);
    }
  }
  return state.estimate;
}

type ValueOf<A> = A extends fc.Arbitrary<infer T> ? T : never;

export const scaleCases = fc.record({
  curvatures: fc.array(fc.double({ min: 0.1, max: 10, noNaN: true }), { minLength: 1, maxLength: 2 }),
  start: fc.tuple(fc.double({ min: -2, max: 2, noNaN: true }), fc.double({ min: -2, max: 2, noNaN: true })),
  exponent: fc.double({ min: -6, max: 6, noNaN: true }),
});

/**
 * Scaled by a power of four, roots and products included, floating point rounds alike, so that the path must be the
 * same to the last digit; by any other number it may differ by rounding, which the law's division by what it has
 * learnt so far can make larger.
 */
export function checkNewtonScale({ curvatures, start, exponent }: ValueOf<typeof scaleCases>): void {
  const from = start.slice(0, curvatures.length);
  const plain = newtonPath(curvatures, from, 1);
  expect(newtonPath(curvatures, from, 4 ** Math.round(exponent))).toEqual(plain);
  const scaled = newtonPath(curvatures, from, 10 ** exponent);
  plain.forEach((value, i) => expect(Math.abs(value - (scaled[i] ?? NaN))).toBeLessThan(1e-3));
}

/** Laws that answer the negative of what they are told with the negative of their move. */
const oddLaws = lawCases.filter(({ id }) => !/newton|measured|bounded|slope|constrained|perturb/.test(id));

export const mirrorCases = fc.record({
  law: fc.nat(oddLaws.length - 1),
  objectives: fc.array(fc.double({ min: -100, max: 100, noNaN: true }), {
    minLength: 1,
    maxLength: 150,
    size: 'max',
  }),
  invalidAt: fc.nat(300),
});

/**
 * Told the negative of a record of objectives, whatever they answered, the estimate goes the same way to the other
 * side: climbing one is descending the other, with the same filters and the same retreats.
 *
 * @returns whether the estimate moved at all
 */
export function checkMirror({ law: index, objectives, invalidAt }: ValueOf<typeof mirrorCases>): boolean {
  const { law, parameters } = lawCaseAt(oddLaws, index);
  const own = parameters([{ min: -5, max: 5 }]);
  const [up, down] = [law.init(own, [0]), law.init(own, [0])];
  objectives.forEach((objective, i) => {
    law.step(up, { objective, isValid: i !== invalidAt }, 0.05);
    law.step(down, { objective: -objective, isValid: i !== invalidAt }, 0.05);
    expect(Math.abs((up.estimate[0] ?? NaN) + (down.estimate[0] ?? NaN))).toBeLessThan(1e-9);
    expect(Math.abs((up.dither[0] ?? NaN) - (down.dither[0] ?? NaN))).toBeLessThan(1e-9);
  });
  return up.estimate[0] !== 0;
}
