/**
 * How far a reading can be trusted. Outcomes of a scan are values, not throws.
 * Only `good` readings are used by seeking laws, objectives and interlocks as numbers.
 */
export const Quality = {
  /** Read in this scan and finite. */
  good: 0,
  /** Not read in this scan; the value is the last one known. */
  stale: 1,
  /** The device refused it, or the answer was no valid number. */
  bad: 2,
  /** Never read, or its connection is down. */
  missing: 3,
} as const;

export type Quality = (typeof Quality)[keyof typeof Quality];
export type QualityName = keyof typeof Quality;
