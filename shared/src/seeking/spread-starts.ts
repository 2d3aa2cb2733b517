/** Box that starts are spread over, one entry per actuator, its unit. */
export type StartBox = readonly { readonly min: number; readonly max: number }[];

const primes = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53];

/**
 * A full grid for a survey, edges included; the first actuator changes slowest and neighbours follow each other
 * (every other row runs backwards), so that moves are short.
 *
 * @param points per actuator, at least 2
 * @example gridStarts([{ min: 0, max: 10 }], 3) // [[0], [5], [10]]
 */
export function gridStarts(box: StartBox, points: number): number[][] {
  return box.reduce<number[][]>(
    (rows, { min, max }) =>
      rows.flatMap((row, r) => {
        const values = Array.from({ length: points }, (_, i) => min + ((max - min) * i) / (points - 1));
        return (r % 2 === 0 ? values : values.reverse()).map((value) => [...row, value]);
      }),
    [[]],
  );
}

/**
 * Points spread evenly over the box for multi-start: the Halton sequence from its first point on; for at most 16
 * actuators.
 *
 * @source J. H. Halton (1960), "On the efficiency of certain quasi-random sequences of points in evaluating
 * multi-dimensional integrals", Numerische Mathematik 2:84–90 (from memory)
 * @example spreadStarts([{ min: 0, max: 8 }], 4) // [[4], [2], [6], [1]]
 */
export function spreadStarts(box: StartBox, count: number): number[][] {
  return Array.from({ length: count }, (_, k) =>
    box.map(({ min, max }, i) => min + (max - min) * radicalInverse(k + 1, primes[i] ?? 59)),
  );
}

/** Digits of a number behind the point, in reverse. */
function radicalInverse(index: number, base: number): number {
  let rest = index;
  let weight = 1 / base;
  let value = 0;
  while (rest > 0) {
    value += (rest % base) * weight;
    rest = Math.floor(rest / base);
    weight /= base;
  }
  return value;
}
