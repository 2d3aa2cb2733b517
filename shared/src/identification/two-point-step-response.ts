import { DomainError } from '../errors/domain-error.js';
import { checkStepRecord, type StepRecord, type StepResponse } from './step-record.js';

/** Fractions of the way at which a first-order answer is after τ/3 and τ: 28.3 % and 63.2 %. */
const fractions = [-Math.expm1(-1 / 3), -Math.expm1(-1)] as const;
/** Share of the record, from its end, that is taken for the final value. */
const tailShare = 0.1;

/**
 * First-order answer with dead time from two points: τ = 1.5·(t63 − t28), dead time = t63 − τ. No standard errors;
 * it is where `fitStepResponse` starts from.
 *
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the answer does not rise to
 * its end
 * @source the 28.3 %/63.2 % method of C. L. Smith (1972), "Digital Computer Process Control", as given in
 * process-control texts, e.g. D. E. Seborg et al. (2011), "Process Dynamics and Control", section 7.2; exact
 * fractions here
 */
export function twoPointStepResponse(record: StepRecord): StepResponse<number> {
  checkStepRecord(record);
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
