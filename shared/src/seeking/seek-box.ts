/** @returns the value held between two limits; the lower limit wins where they contradict */
export function held(value: number, lowest: number, highest: number): number {
  return Math.max(Math.min(value, highest), lowest);
}

/** Largest value whose sum with `reach` does not round to more than `max`. */
export function highestWithin(max: number, reach: number): number {
  let value = max - reach;
  while (value + reach > max) value -= roundingOf(max, reach, value);
  return value;
}

/** Smallest value from which `reach` can be taken without rounding to less than `min`. */
export function lowestWithin(min: number, reach: number): number {
  return -highestWithin(-min, reach);
}

/** @returns the dither, cut so that estimate and dither together do not round to a value outside the box */
export function ditherWithin(estimate: number, dither: number, min: number, max: number): number {
  if (estimate + dither > max) return highestWithin(max, estimate);
  if (estimate + dither < min) return lowestWithin(min, -estimate);
  return dither;
}

function roundingOf(a: number, b: number, c: number): number {
  return Math.max(Math.abs(a), Math.abs(b), Math.abs(c)) * Number.EPSILON || Number.MIN_VALUE;
}
