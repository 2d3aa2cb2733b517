import { DomainError } from '../errors/domain-error.js';
import { fitLinear, type LeastSquaresFit } from './least-squares.js';
import type { StepRecord } from './step-record.js';

/** Standard errors by which the change must stand out for the record to show a step at all. */
const certainErrors = 5;
/** Least samples before and after the jump. */
const samplesMin = 3;

/** Two levels, and the first sample at the second of them. */
export interface StepAtOnce {
  /** Start and change. */
  fit: LeastSquaresFit;
  firstSample: number;
}

/**
 * The answer of a plant that is quicker than the samples: one level before and another after a jump, which is looked
 * for from the first sample after the step on.
 *
 * @throws analysis.no-fit where no jump stands out of the noise
 */
export function stepBetweenSamples(record: StepRecord): StepAtOnce {
  const { timesS, values, stepAtS } = record;
  const first = Array.from(timesS).findIndex((tS) => tS > stepAtS);
  let best: StepAtOnce | null = null;
  for (let k = Math.max(first, samplesMin); k <= values.length - samplesMin; k += 1) {
    const fit = fitLinear(
      Array.from(values, (_, i) => [1, i >= k ? 1 : 0]),
      values,
    );
    if (!best || fit.sumOfSquares < best.fit.sumOfSquares) best = { fit, firstSample: k };
  }
  const [, change = NaN] = best?.fit.parameters ?? [];
  const [, error = NaN] = best?.fit.standardErrors ?? [];
  if (!best || !(Math.abs(change) > certainErrors * error)) throw new DomainError('analysis.no-fit');
  return best;
}
