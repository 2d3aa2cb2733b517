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

export function checkInside(
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

/** Visits of a survey after which it is a mistake: at a second each they take three hours. */
const visitsMax = 10_000;

function checkSurvey(c: PreflightCase, step: StepOf<'survey'>): void {
  const { actuators, averageS } = step.parameters;
  actuators.forEach((_, index) => checkRange(c, step, index));
  const visits = actuators.reduce((n, { points, isUpAndDown }) => n * points * (isUpAndDown ? 2 : 1), 1);
  if (visits > visitsMax) {
    const message = `The survey has ${visits} visits, ${visitsMax} are the most: take fewer points.`;
    c.faults.error('survey-too-large', step.id, 'parameters.actuators', message);
  }
  if (averageS * 1000 < 2 * c.rig.periodMs) {
    const message = 'The averaging time is shorter than two scans: the scatter of a point cannot be known.';
    c.faults.warning('average-too-short', step.id, 'parameters.averageS', message);
  }
}

function checkRange(c: PreflightCase, step: StepOf<'survey'>, index: number): void {
  const range = step.parameters.actuators[index];
  if (!range) return;
  const { channel, from, to, points } = range;
  const place = `parameters.actuators[${index}]`;
  checkInside(c, step, `${place}.from`, channel, from);
  checkInside(c, step, `${place}.to`, channel, to);
  const span = Math.abs((constantOf(to) ?? NaN) - (constantOf(from) ?? NaN));
  const grid = c.grids?.get(channel)?.step ?? 0;
  if (span === 0) {
    const message = 'The survey begins and ends at the same value: give it a span to look at.';
    c.faults.error('survey-span', step.id, `${place}.to`, message);
  } else if (span / (points - 1) < grid) {
    const message = `The points lie closer than the actuator's grid of ${withUnit(c, channel, grid)}: take fewer points.`;
    c.faults.warning('points-below-grid', step.id, `${place}.points`, message);
  }
}
