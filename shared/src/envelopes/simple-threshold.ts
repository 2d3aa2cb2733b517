/** A condition that compares one channel with one number. */
export interface SimpleThreshold {
  channel: string;
  /** True on the side on which the condition holds. */
  isAbove: boolean;
  value: number;
}

const comparison = /^\s*([a-z][a-zA-Z0-9]*)\s*(>=?|<=?)\s*(-?\d+(?:\.\d+)?(?:e-?\d+)?)\s*$/;

/**
 * Reads the threshold out of a condition so simple that it can be drawn as a line; null for any other.
 *
 * @example
 * simpleThreshold('co > 400') // { channel: 'co', isAbove: true, value: 400 }
 */
export function simpleThreshold(condition: string): SimpleThreshold | null {
  const match = comparison.exec(condition);
  const [, channel, operator, value] = match ?? [];
  if (channel === undefined || operator === undefined || value === undefined) return null;
  return { channel, isAbove: operator.startsWith('>'), value: Number(value) };
}

/** How far a value is from the threshold on the safe side, channel unit; negative once it is past. */
export function marginTo(threshold: SimpleThreshold, value: number): number {
  return threshold.isAbove ? threshold.value - value : value - threshold.value;
}
