import { DomainError } from '../errors/domain-error.js';
import { autocorrelation } from '../signals/autocorrelation.js';
import { checkSeries, checkSettings } from '../signals/check-settings.js';
import type { Estimate } from '../signals/estimate.js';
import { fitNonlinear, type NonlinearModel } from './fit-nonlinear.js';

/** A recorded answer to a step of an actuator. */
export interface StepRecord {
  /** Times of the samples, s, rising. */
  timesS: ArrayLike<number>;
  /** Channel that answers, its unit. */
  values: ArrayLike<number>;
  /** When the actuator stepped, s. */
  stepAtS: number;
  /** By how much, actuator unit; not 0. */
  stepSize: number;
}

/** y = start + gain·stepSize·(1 − e^(−(t − stepAt − deadTime)/timeConstant)) after the dead time. */
export interface StepResponse<Quantity> {
  /** Channel unit per actuator unit. */
  gain: Quantity;
  timeConstantS: Quantity;
  /** May come out below 0 by some standard errors where there is none. */
  deadTimeS: Quantity;
  /** Value before the step, channel unit. */
  start: Quantity;
}

export interface StepResponseFit extends StepResponse<Estimate> {
  /** Standard deviation of the noise, channel unit. */
  noise: number;
  /**
   * Lag-1 autocorrelation of the residuals. The standard errors hold for independent noise (near 0); at r they
   * are too small by about √((1 + r)/(1 − r)), and a value near 1 says that the plant is not of first order.
   */
  residualAutocorrelation: number;
}

/** Fractions of the way at which a first-order answer is after τ/3 and τ: 28.3 % and 63.2 %. */
const fractions = [-Math.expm1(-1 / 3), -Math.expm1(-1)] as const;
/** Share of the record, from its end, that is taken for the final value. */
const tailShare = 0.1;

/**
 * First-order answer with dead time from two points: τ = 1.5·(t63 − t28), dead time = t63 − τ. No standard errors;
 * it is where `fitStepResponse` starts from.
 *
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the answer does not rise to its end
 * @source the 28.3 %/63.2 % method of C. L. Smith (1972), "Digital Computer Process Control", as given in process-control
 * texts, e.g. D. E. Seborg et al. (2011), "Process Dynamics and Control", section 7.2; exact fractions here
 */
export function twoPointStepResponse(record: StepRecord): StepResponse<number> {
  checkRecord(record);
  const { timesS, values, stepAtS, stepSize } = record;
  const before = Array.from(timesS).filter((t) => t <= stepAtS).length;
  const start = meanOf(values, 0, Math.max(before, 1));
  const tail = Math.max(1, Math.floor((values.length - before) * tailShare));
  const change = meanOf(values, values.length - tail, values.length) - start;
  const [early, late] = fractions.map((share) => crossingS(record, start, change * share)) as [
    number,
    number,
  ];
  const timeConstantS = 1.5 * (late - early);
  if (!(timeConstantS > 0)) throw new DomainError('analysis.no-fit');
  return { gain: change / stepSize, timeConstantS, deadTimeS: late - timeConstantS - stepAtS, start };
}

/**
 * First-order answer with dead time by least squares, begun from two points. The record should begin before the step,
 * and last four time constants or more after it.
 *
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the record shows no such answer
 */
export function fitStepResponse(record: StepRecord): StepResponseFit {
  const begin = twoPointStepResponse(record);
  const { stepSize } = record;
  const fit = fitNonlinear(stepModel(record), record.values, [
    begin.start,
    begin.gain * stepSize,
    begin.timeConstantS,
    begin.deadTimeS,
  ]);
  const estimate = (i: number, scale = 1): Estimate => ({
    value: fit.parameters[i]! / scale,
    standardError: fit.standardErrors[i]! / Math.abs(scale),
  });
  return {
    start: estimate(0),
    gain: estimate(1, stepSize),
    timeConstantS: estimate(2),
    deadTimeS: estimate(3),
    noise: fit.sigma,
    residualAutocorrelation: autocorrelation(fit.residuals, 1)[1]!,
  };
}

function checkRecord({ timesS, values, stepAtS, stepSize }: StepRecord): void {
  checkSeries(values, 'values', 8);
  checkSeries(timesS, 'timesS', values.length);
  checkSettings(
    [timesS.length === values.length, 'timesS', 'must be as many as the values.'],
    [stepSize !== 0 && Number.isFinite(stepSize), 'stepSize', 'must not be 0.'],
    [stepAtS < timesS[timesS.length - 1]!, 'stepAtS', 'must lie before the end of the record.'],
  );
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

/** When the answer passes a level: half-way between the first sample beyond it and the last one short of it. */
function crossingS({ timesS, values, stepAtS }: StepRecord, start: number, rise: number): number {
  const beyond = (i: number) => (values[i]! - start - rise) * Math.sign(rise) >= 0;
  const after = Array.from(timesS, (_, i) => i).filter((i) => timesS[i]! > stepAtS && i > 0);
  const first = after.find(beyond);
  const last = after.findLast((i) => !beyond(i) && i + 1 < values.length);
  if (first === undefined) throw new DomainError('analysis.no-fit');
  const at = (i: number) => {
    const [low, high] = [values[i - 1]! - start, values[i]! - start];
    const share = high === low ? 1 : Math.min(Math.max((rise - low) / (high - low), 0), 1);
    return timesS[i - 1]! + share * (timesS[i]! - timesS[i - 1]!);
  };
  return (at(first) + at(last === undefined ? first : last + 1)) / 2;
}

function meanOf(values: ArrayLike<number>, from: number, to: number): number {
  let sum = 0;
  for (let i = from; i < to; i += 1) sum += values[i]!;
  return sum / (to - from);
}
