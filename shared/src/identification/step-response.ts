import { DomainError } from '../errors/domain-error.js';
import { autocorrelation } from '../signals/autocorrelation.js';
import type { Estimate } from '../signals/estimate.js';
import { fitNonlinear, type NonlinearModel } from './fit-nonlinear.js';
import type { LeastSquaresFit } from './least-squares.js';
import { checkStepRecord, type StepRecord, type StepResponse } from './step-record.js';
import { stepBetweenSamples } from './step-at-once.js';
import { twoPointStepResponse } from './two-point-step-response.js';

export interface StepResponseFit extends StepResponse<Estimate> {
  /** Standard deviation of the noise, channel unit. */
  noise: number;
  /**
   * Lag-1 autocorrelation of the residuals. The standard errors hold for independent noise (near 0); at r they
   * are too small by about √((1 + r)/(1 − r)), and a value near 1 says that the plant is not of first order.
   */
  residualAutocorrelation: number;
}

/** Start, change, time constant and dead time. */
type Parameters = [start: number, change: number, timeConstantS: number, deadTimeS: number];

/**
 * First-order answer with dead time by least squares. The search begins from two points, and from the best of a
 * coarse grid as well, because noise can lead the two points astray; the better end counts. The record should
 * begin before the step, and last four time constants or more after it.
 *
 * A plant that answers between two samples leaves time constant and dead time undetermined: they come out as 0 and
 * as the whole samples that it waited, with the standard error of anything within a sample, dt/√12.
 *
 * Standard errors are those of the linearised model: right while the noise is below about a sixth of the change
 * (with some hundred samples), too small above.
 *
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the record shows no such answer
 */
export function fitStepResponse(record: StepRecord): StepResponseFit {
  checkStepRecord(record);
  const model = stepModel(record);
  const fits = [fromTwoPoints(record), fromGrid(record, model)].flatMap((start) =>
    descend(model, record, start),
  );
  const [first] = fits;
  if (!first) return atOnce(record);
  const fit = fits.reduce((a, b) => (b.sumOfSquares < a.sumOfSquares ? b : a), first);
  const estimate = (i: number, scale = 1): Estimate => ({
    value: fit.parameters[i]! / scale,
    standardError: fit.standardErrors[i]! / Math.abs(scale),
  });
  return {
    start: estimate(0),
    gain: estimate(1, record.stepSize),
    timeConstantS: estimate(2),
    deadTimeS: estimate(3),
    noise: fit.sigma,
    residualAutocorrelation: autocorrelation(fit.residuals, 1)[1]!,
  };
}

function atOnce(record: StepRecord): StepResponseFit {
  const { timesS, stepAtS, stepSize } = record;
  const { fit, firstSample } = stepBetweenSamples(record);
  const withinSample = (timesS[firstSample]! - timesS[firstSample - 1]!) / Math.sqrt(12);
  const level = (i: number, scale: number): Estimate => ({
    value: fit.parameters[i]! / scale,
    standardError: fit.standardErrors[i]! / Math.abs(scale),
  });
  return {
    start: level(0, 1),
    gain: level(1, stepSize),
    timeConstantS: { value: 0, standardError: withinSample },
    deadTimeS: { value: Math.max(0, timesS[firstSample - 1]! - stepAtS), standardError: withinSample },
    noise: fit.sigma,
    residualAutocorrelation: autocorrelation(fit.residuals, 1)[1]!,
  };
}

/** The fit from a start; none where it leads nowhere. */
function descend(model: NonlinearModel, record: StepRecord, start: Parameters | null): LeastSquaresFit[] {
  const fit = start && orNull(() => fitNonlinear(model, record.values, start));
  return fit ? [fit] : [];
}

function fromTwoPoints(record: StepRecord): Parameters | null {
  const found = orNull(() => twoPointStepResponse(record));
  return found && [found.start, found.gain * record.stepSize, found.timeConstantS, found.deadTimeS];
}

/** The result, or null where the data do not determine one. */
function orNull<Result>(find: () => Result): Result | null {
  try {
    return find();
  } catch (error) {
    if (error instanceof DomainError && error.code === 'analysis.no-fit') return null;
    throw error;
  }
}

/** Time constants and dead times of the grid, as shares of the time after the step. */
const gridTimeConstants = [1 / 40, 1 / 20, 1 / 10, 1 / 5, 2 / 5];
const gridDeadTimes = [0, 1 / 20, 1 / 10, 1 / 5, 2 / 5];

/** Best of a coarse grid; for given times, start and change follow from a straight line. */
function fromGrid(record: StepRecord, model: NonlinearModel): Parameters {
  const { timesS, values, stepAtS } = record;
  const spanS = timesS[timesS.length - 1]! - stepAtS;
  let best: Parameters = [0, 0, spanS, 0];
  let least = Infinity;
  for (const share of gridTimeConstants) {
    for (const dead of gridDeadTimes) {
      const shape = Array.from(values, (_, i) => model.valueAt([0, 1, share * spanS, dead * spanS], i));
      const { start, change, squares } = regress(shape, values);
      if (squares >= least) continue;
      least = squares;
      best = [start, change, share * spanS, dead * spanS];
    }
  }
  return best;
}

function regress(
  x: readonly number[],
  y: ArrayLike<number>,
): { start: number; change: number; squares: number } {
  const n = x.length;
  const meanX = x.reduce((sum, value) => sum + value, 0) / n;
  const meanY = Array.from(y).reduce((sum, value) => sum + value, 0) / n;
  const xx = x.reduce((sum, value) => sum + (value - meanX) ** 2, 0);
  const xy = x.reduce((sum, value, i) => sum + (value - meanX) * (y[i]! - meanY), 0);
  const change = xx > 0 ? xy / xx : 0;
  const start = meanY - change * meanX;
  const squares = x.reduce((sum, value, i) => sum + (y[i]! - start - change * value) ** 2, 0);
  return { start, change, squares };
}

function stepModel({ timesS, stepAtS }: StepRecord): NonlinearModel {
  const since = (t: number, deadTimeS: number) => t - stepAtS - deadTimeS;
  return {
    valueAt([start = NaN, change = NaN, tau = NaN, deadTimeS = NaN], i) {
      if (!(tau > 0)) return NaN;
      return start - change * Math.expm1(-Math.max(since(timesS[i]!, deadTimeS), 0) / tau);
    },
    slopesAt([, change = NaN, tau = NaN, deadTimeS = NaN], i) {
      const t = since(timesS[i]!, deadTimeS);
      if (t <= 0) return [1, 0, 0, 0];
      const left = Math.exp(-t / tau);
      return [1, 1 - left, ((-change * t) / (tau * tau)) * left, (-change / tau) * left];
    },
  };
}
