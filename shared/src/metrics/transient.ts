import { checkSeries, checkSettings } from '../signals/check-settings.js';

/**
 * When a series comes within a band of a target and stays there to its end.
 *
 * @param timesS rising, s
 * @param band greatest distance from the target, unit of the values; 0 or above
 * @returns time since the first sample, s; null where it does not stay, or its last value is outside
 * @throws analysis.invalid-input, analysis.too-little-data
 * @example
 * timeToBandS([0, 1, 2, 3], [0, 8, 10, 11], 10, 1) // 2
 */
export function timeToBandS(
  timesS: ArrayLike<number>,
  values: ArrayLike<number>,
  target: number,
  band: number,
): number | null {
  checkSeries(values, 'values');
  checkSeries(timesS, 'timesS', values.length);
  checkSettings(
    [band >= 0, 'band', 'must be 0 or above.'],
    [Number.isFinite(target), 'target', 'must be finite.'],
  );
  let from = values.length;
  while (from > 0 && Math.abs(values[from - 1]! - target) <= band) from -= 1;
  return from === values.length ? null : timesS[from]! - timesS[0]!;
}

/**
 * How far a series goes beyond its target, seen from where it began.
 *
 * @param target where it should end; not its first value
 * @returns share of the way from the first value to the target: 0.16 is 16 %; 0 where it does not go beyond
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source overshoot as in IEC 60050-351, 351-45-30 (from memory)
 * @example
 * overshootShare([0, 7, 12, 9, 10], 10) // 0.2
 */
export function overshootShare(values: ArrayLike<number>, target: number): number {
  checkSeries(values, 'values');
  const way = target - values[0]!;
  checkSettings([Number.isFinite(way) && way !== 0, 'target', 'must differ from the first value.']);
  let share = 0;
  for (let i = 0; i < values.length; i += 1) share = Math.max(share, (values[i]! - target) / way);
  return share;
}
