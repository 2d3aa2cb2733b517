import type { StepOf } from '../experiment.schema.js';
import type { NumericParameter } from '../numeric-parameter.schema.js';
import { lawFields } from '../seek/law-form.js';
import { isPeriodic } from '../seek/seek-fields.js';
import type { LawParameter } from '../seek/seek-parameters.schema.js';
import { constantOf } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';

type Seek = StepOf<'seek'>;

/** Dither, filters, adaptation and times of a Seek against each other and the scan. */
export function checkSeekTiming(c: PreflightCase, step: Seek): void {
  checkFilters(c, step);
  checkDwell(c, step);
  const periodsS = knownPeriodsS(step);
  periodsS.forEach((periodS, index) => {
    if (periodS !== null) checkPeriod(c, step, index, periodS);
  });
  checkAdaptation(c, step, periodsS);
  const slowestS = slowestTrialS(step, periodsS);
  if (slowestS !== null) checkEnds(c, step, slowestS);
}

/** Dither period of each actuator, s; null where there is none or it is not known yet. */
export function knownPeriodsS(step: Seek): (number | null)[] {
  const { law, actuators } = step.parameters;
  if (!isPeriodic(law.id)) return actuators.map(() => null);
  return actuators.map(({ periodS }) => {
    const value = periodS === null ? null : constantOf(periodS);
    return value !== null && value > 0 ? value : null;
  });
}

/** A parameter of the law that is known to be a number before the run; null where the law has none or it is not. */
export function lawNumber(step: Seek, name: string): number | null {
  const { id, parameters } = step.parameters.law;
  if (!lawFields(id).some((field) => field.name === name)) return null;
  const parameter: LawParameter | undefined = parameters[name];
  const isNumeric = typeof parameter === 'number' || (typeof parameter === 'object' && parameter !== null);
  return isNumeric ? constantOf(parameter as NumericParameter) : null;
}

/** The longest dither period, or the trial of a law that dwells, s. */
function slowestTrialS(step: Seek, periodsS: readonly (number | null)[]): number | null {
  const known = periodsS.filter((periodS) => periodS !== null);
  if (known.length > 0) return Math.max(...known);
  const dwellS = lawNumber(step, 'dwellS');
  return dwellS === null ? null : 2 * dwellS;
}

function checkFilters(c: PreflightCase, step: Seek): void {
  const washout = lawNumber(step, 'washoutRatio');
  const lowPass = lawNumber(step, 'lowPassRatio');
  const faster = 'its corner should lie below the dither frequency (ratio below 1)';
  const warn = (code: string, name: string, message: string) =>
    c.faults.warning(code, step.id, `parameters.law.parameters.${name}`, message);
  if (washout !== null && washout >= 1) {
    warn('washout-ratio', 'washoutRatio', `The washout takes away part of the dither's answer: ${faster}.`);
  }
  // Its time constant is 1/(2π·ratio) dither periods.
  if (washout !== null && washout < 1 / (20 * Math.PI)) {
    const message =
      'The washout needs more than ten dither periods to forget a change: make its ratio larger.';
    warn('washout-slow', 'washoutRatio', message);
  }
  if (lowPass !== null && lowPass >= 1) {
    warn(
      'low-pass-ratio',
      'lowPassRatio',
      `The low-pass lets the dither through to the estimate: ${faster}.`,
    );
  }
}

function checkDwell(c: PreflightCase, step: Seek): void {
  const dwellS = lawNumber(step, 'dwellS');
  if (dwellS === null) return;
  const scans = ((dwellS - (lawNumber(step, 'settleS') ?? 0)) * 1000) / c.rig.periodMs;
  if (scans >= 2) return;
  const message =
    'Fewer than two scans of each dwell are used: make the dwell longer or the settling shorter.';
  c.faults.warning('dwell-too-short', step.id, 'parameters.law.parameters.dwellS', message);
}

function checkPeriod(c: PreflightCase, step: Seek, index: number, periodS: number): void {
  const scans = (periodS * 1000) / c.rig.periodMs;
  const field = `parameters.actuators[${index}].periodS`;
  const found = `The dither has ${Number(scans.toPrecision(3))} scans a period`;
  if (scans < 4) {
    const message = `${found}, at least 4 are needed: make the period longer.`;
    c.faults.error('dither-too-fast', step.id, field, message);
  } else if (scans < 8) {
    const message = `${found}, above an eighth of the scan rate: 8 or more are better.`;
    c.faults.warning('dither-fast', step.id, field, message);
  }
}

/** Adaptation must be slower than the dither by this, in rad: what the averaging of a law rests on. */
const adaptationShare = 0.1;

function checkAdaptation(c: PreflightCase, step: Seek, periodsS: readonly (number | null)[]): void {
  const known = periodsS.filter((periodS) => periodS !== null);
  if (known.length === 0) return;
  const mostPerS = (adaptationShare * 2 * Math.PI) / Math.max(...known);
  const most = `${Number(mostPerS.toPrecision(3))} a second at most`;
  for (const name of ['rate', 'inverseRate']) {
    const rate = lawNumber(step, name);
    if (rate === null || rate <= mostPerS) continue;
    const message = `The law would adapt faster than a tenth of its slowest dither: ${most}, or faster dithers.`;
    c.faults.warning('adaptation-fast', step.id, `parameters.law.parameters.${name}`, message);
  }
  step.parameters.actuators.forEach(({ speedMax, amplitude }, index) => {
    const speed = speedMax === null ? null : constantOf(speedMax);
    const size = constantOf(amplitude);
    const periodS = periodsS[index];
    if (speed === null || size === null || typeof periodS !== 'number') return;
    // In a tenth of the dither's own speed, 2πa/T, there are 0.63 amplitudes a period.
    if (speed <= (adaptationShare * 2 * Math.PI * size) / periodS) return;
    const message =
      'The estimate may move faster than a tenth of the dither does: the law cannot tell the two apart then.';
    c.faults.warning('adaptation-fast', step.id, `parameters.actuators[${index}].speedMax`, message);
  });
}

function checkEnds(c: PreflightCase, step: Seek, periodS: number): void {
  const { end, invalidForS } = step.parameters;
  const warn = (code: string, field: string, message: string) =>
    c.faults.warning(code, step.id, `parameters.${field}`, message);
  if (end.afterS < 10 * periodS) {
    warn(
      'seek-too-short',
      'end.afterS',
      'The time is under ten dither periods: adaptation is slower than that.',
    );
  }
  if (end.whenConverged && end.whenConverged.forS < 2 * periodS) {
    const message =
      'The time in the band is under two dither periods: a pause of the estimate would pass for the end.';
    warn('convergence-too-short', 'end.whenConverged.forS', message);
  }
  if (end.whenConverged && end.whenConverged.forS >= end.afterS) {
    warn(
      'convergence-never',
      'end.whenConverged.forS',
      'The time in the band is not over before the step ends anyway.',
    );
  }
  if (invalidForS < periodS) {
    const message =
      'The time to give up is under one dither period: it leaves no time to come back from a retreat.';
    warn('retreat-too-short', 'invalidForS', message);
  }
}
