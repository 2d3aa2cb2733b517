import type { StepOf } from '../experiment.schema.js';
import { constantOf } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';
import { limitOf, withUnit } from './limits.js';

type Seek = StepOf<'seek'>;

/** Dither, filters and times of Seek, as far as they are known before the run. */
export function checkSeekTiming(c: PreflightCase): void {
  for (const step of c.graph.steps) {
    if (step.kind !== 'seek') continue;
    checkPositive(c, step);
    checkAmplitude(c, step);
    checkFilters(c, step);
    const periodS = constantOf(step.parameters.ditherPeriodS);
    if (periodS === null || !(periodS > 0)) continue;
    checkPeriod(c, step, periodS);
    checkEnds(c, step, periodS);
  }
}

function checkPositive(c: PreflightCase, step: Seek): void {
  for (const name of ['ditherAmplitude', 'ditherPeriodS', 'gain'] as const) {
    const value = constantOf(step.parameters[name]);
    if (value !== null && value <= 0) {
      c.faults.error('not-positive', step.id, `parameters.${name}`, 'This must be above zero.');
    }
  }
}

function checkAmplitude(c: PreflightCase, step: Seek): void {
  const { actuator, ditherAmplitude, ditherPeriodS } = step.parameters;
  const amplitude = constantOf(ditherAmplitude);
  if (amplitude === null) return;
  const field = 'parameters.ditherAmplitude';
  const grid = c.grids?.get(actuator)?.step ?? 0;
  if (amplitude > 0 && amplitude < grid) {
    const message = `The dither is smaller than the actuator's grid of ${withUnit(c, actuator, grid)}: make it larger.`;
    c.faults.error('dither-below-grid', step.id, field, message);
  }
  const limit = limitOf(c, actuator);
  if (!limit) return;
  if (amplitude > limit.ditherAmplitudeMax) {
    const most = withUnit(c, actuator, limit.ditherAmplitudeMax);
    const message = `The envelope allows a dither amplitude of ${most} at most: make it smaller.`;
    c.faults.error('dither-above-envelope', step.id, field, message);
  }
  const periodS = constantOf(ditherPeriodS) ?? Infinity;
  const ratePerS = (amplitude * 2 * Math.PI) / periodS;
  if (periodS > 0 && ratePerS > limit.slewPerS) {
    const rates = `${withUnit(c, actuator, ratePerS)} a second, the slew limit is ${withUnit(c, actuator, limit.slewPerS)}`;
    const message = `The dither would move at up to ${rates}: make it smaller or slower.`;
    c.faults.error('dither-slew', step.id, field, message);
  }
}

function checkFilters(c: PreflightCase, step: Seek): void {
  const { washoutRatio, lowPassRatio } = step.parameters;
  const faster = 'its corner should lie below the dither frequency (ratio below 1)';
  if (washoutRatio >= 1) {
    const message = `The washout takes away part of the dither's answer: ${faster}.`;
    c.faults.warning('washout-ratio', step.id, 'parameters.washoutRatio', message);
  }
  // Its time constant is 1/(2π·ratio) dither periods.
  if (washoutRatio < 1 / (20 * Math.PI)) {
    const message =
      'The washout needs more than ten dither periods to forget a change: make its ratio larger.';
    c.faults.warning('washout-slow', step.id, 'parameters.washoutRatio', message);
  }
  if (lowPassRatio >= 1) {
    const message = `The low-pass lets the dither through to the estimate: ${faster}.`;
    c.faults.warning('low-pass-ratio', step.id, 'parameters.lowPassRatio', message);
  }
}

function checkPeriod(c: PreflightCase, step: Seek, periodS: number): void {
  const scans = (periodS * 1000) / c.rig.periodMs;
  const field = 'parameters.ditherPeriodS';
  const found = `The dither has ${Number(scans.toPrecision(3))} scans a period`;
  if (scans < 4) {
    c.faults.error(
      'dither-too-fast',
      step.id,
      field,
      `${found}, at least 4 are needed: make the period longer.`,
    );
  } else if (scans < 8) {
    c.faults.warning(
      'dither-fast',
      step.id,
      field,
      `${found}, above an eighth of the scan rate: 8 or more are better.`,
    );
  }
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
