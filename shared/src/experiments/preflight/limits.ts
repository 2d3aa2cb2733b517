import type { ActuatorLimit } from '../../envelopes/envelope.schema.js';
import type { NumericParameter, Step, StepOf } from '../experiment.schema.js';
import { constantOf } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';

/** Settings that are known before the run against the envelope, and against each other. */
export function checkLimits(c: PreflightCase): void {
  for (const step of c.graph.steps) {
    if (step.kind === 'move') checkMove(c, step);
    if (step.kind === 'settle') checkSettle(c, step);
    if (step.kind === 'survey') checkSurvey(c, step);
    if (step.kind === 'seek') checkSeekBox(c, step);
  }
}

export function limitOf(c: PreflightCase, channel: string): ActuatorLimit | null {
  return c.envelope?.limits.find((limit) => limit.channel === channel) ?? null;
}

/** A value with the unit of its channel, for messages. */
export function withUnit(c: PreflightCase, channel: string, value: number): string {
  const unit = c.rig.channels.find((candidate) => candidate.id === channel)?.unit ?? '';
  return `${Number(value.toPrecision(6))} ${unit}`.trimEnd();
}

function checkInside(
  c: PreflightCase,
  step: Step,
  field: string,
  channel: string,
  p: NumericParameter,
): void {
  const limit = limitOf(c, channel);
  const value = constantOf(p);
  if (!limit || value === null || (value >= limit.min && value <= limit.max)) return;
  if (Number.isNaN(value)) return;
  const range = `${withUnit(c, channel, limit.min)} to ${withUnit(c, channel, limit.max)}`;
  const message = `${withUnit(c, channel, value)} is outside the envelope of "${channel}": stay within ${range}.`;
  c.faults.error('outside-envelope', step.id, field, message);
}

function checkMove(c: PreflightCase, step: StepOf<'move'>): void {
  step.parameters.targets.forEach(({ channel, value }, index) => {
    checkInside(c, step, `parameters.targets[${index}].value`, channel, value);
  });
  if (step.parameters.rampS >= step.parameters.timeoutS) {
    const message = 'The ramp takes as long as the timeout or longer: make the timeout longer than the ramp.';
    c.faults.error('ramp-timeout', step.id, 'parameters.timeoutS', message);
  }
}

function checkSettle(c: PreflightCase, step: StepOf<'settle'>): void {
  const { forS, timeoutS } = step.parameters;
  if (forS >= timeoutS) {
    const message =
      'The channel must stay in its band for longer than the timeout allows: make the timeout longer.';
    c.faults.error('settle-timeout', step.id, 'parameters.timeoutS', message);
  }
  if (forS * 1000 < 2 * c.rig.periodMs) {
    const message =
      'The time in the band is shorter than two scans: one reading says nothing about settling.';
    c.faults.warning('settle-too-short', step.id, 'parameters.forS', message);
  }
}

function checkSurvey(c: PreflightCase, step: StepOf<'survey'>): void {
  const { actuator, from, to, points, averageS } = step.parameters;
  checkInside(c, step, 'parameters.from', actuator, from);
  checkInside(c, step, 'parameters.to', actuator, to);
  const span = Math.abs((constantOf(to) ?? NaN) - (constantOf(from) ?? NaN));
  const grid = c.grids?.get(actuator)?.step ?? 0;
  if (span === 0) {
    const message = 'The survey begins and ends at the same value: give it a span to look at.';
    c.faults.error('survey-span', step.id, 'parameters.to', message);
  } else if (span / (points - 1) < grid) {
    const message = `The points lie closer than the actuator's grid of ${withUnit(c, actuator, grid)}: take fewer points.`;
    c.faults.warning('points-below-grid', step.id, 'parameters.points', message);
  }
  if (averageS * 1000 < 2 * c.rig.periodMs) {
    const message = 'The averaging time is shorter than two scans: the scatter of a point cannot be known.';
    c.faults.warning('average-too-short', step.id, 'parameters.averageS', message);
  }
}

function checkSeekBox(c: PreflightCase, step: StepOf<'seek'>): void {
  const { actuator, min, max, ditherAmplitude } = step.parameters;
  if (min !== null) checkInside(c, step, 'parameters.min', actuator, min);
  if (max !== null) checkInside(c, step, 'parameters.max', actuator, max);
  if (min !== null && max !== null && min >= max) {
    c.faults.error(
      'seek-box',
      step.id,
      'parameters.min',
      'The lower end of the box must be below its upper end.',
    );
    return;
  }
  const limit = limitOf(c, actuator);
  const amplitude = constantOf(ditherAmplitude);
  if (!limit || amplitude === null) return;
  const low = Math.max(min ?? -Infinity, limit.min + amplitude);
  const high = Math.min(max ?? Infinity, limit.max - amplitude);
  if (low >= high) {
    const message = 'With the dither kept inside the envelope no room is left to seek in: widen the box.';
    c.faults.error('seek-box', step.id, 'parameters.min', message);
  }
}
