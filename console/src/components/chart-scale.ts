/** A linear scale with round ticks. */
export interface Scale {
  min: number;
  max: number;
  ticks: number[];
  /** Place of a value between 0 and 1. */
  at: (value: number) => number;
}

/**
 * A scale over all values with a little air and ticks at 1, 2 or 5 times a power of ten.
 *
 * @example
 * roundScale([0, 10], 5).ticks // [0, 2, 4, 6, 8, 10]
 */
export function roundScale(values: readonly number[], wantedTicks: number): Scale {
  const finite = values.filter((value) => Number.isFinite(value));
  const least = finite.length > 0 ? Math.min(...finite) : 0;
  const greatest = finite.length > 0 ? Math.max(...finite) : 1;
  const air = greatest > least ? (greatest - least) * 0.05 : Math.abs(greatest) * 0.05 || 1;
  const min = least - air;
  const max = greatest + air;
  return { min, max, ticks: roundTicks(min, max, wantedTicks), at: (value) => (value - min) / (max - min) };
}

/** Round numbers from `min` to `max`, about as many as wanted. @param max above `min` */
export function roundTicks(min: number, max: number, wanted: number): number[] {
  const step = roundStep((max - min) / wanted);
  const first = Math.ceil(min / step);
  const last = Math.floor(max / step);
  return Array.from({ length: last - first + 1 }, (_, index) =>
    Number(((first + index) * step).toPrecision(12)),
  );
}

function roundStep(raw: number): number {
  const power = 10 ** Math.floor(Math.log10(raw));
  const share = raw / power;
  return (share <= 1.5 ? 1 : share <= 3 ? 2 : share <= 7 ? 5 : 10) * power;
}
