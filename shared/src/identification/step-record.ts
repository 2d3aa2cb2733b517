import { checkSeries, checkSettings } from '../signals/check-settings.js';

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

/** @throws analysis.invalid-input, analysis.too-little-data */
export function checkStepRecord({ timesS, values, stepAtS, stepSize }: StepRecord): void {
  checkSeries(values, 'values', 8);
  checkSeries(timesS, 'timesS', values.length);
  checkSettings(
    [timesS.length === values.length, 'timesS', 'must be as many as the values.'],
    [stepSize !== 0 && Number.isFinite(stepSize), 'stepSize', 'must not be 0.'],
    [stepAtS < timesS[timesS.length - 1]!, 'stepAtS', 'must lie before the end of the record.'],
  );
}
