import type { StepOf } from '../experiment.schema.js';
import { ditherOf, ditherShare, isPeriodic } from '../seek/seek-fields.js';
import type { SeekActuator } from '../seek/seek-parameters.schema.js';
import { constantOf } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';
import { checkInside, limitOf, withUnit } from './limits.js';

type Seek = StepOf<'seek'>;

/** Boxes and dithers of a Seek against the envelope and the wires of its actuators. */
export function checkSeekLimits(c: PreflightCase, step: Seek): void {
  step.parameters.actuators.forEach((actuator, index) => {
    checkBox(c, step, actuator, index);
    checkAmplitude(c, step, actuator, index);
    checkSpeed(c, step, actuator, index);
  });
}

function checkBox(c: PreflightCase, step: Seek, actuator: SeekActuator, index: number): void {
  const { channel, amplitude } = actuator;
  const place = `parameters.actuators[${index}]`;
  for (const end of ['min', 'max'] as const) {
    const parameter = actuator[end];
    if (parameter !== null) checkInside(c, step, `${place}.${end}`, channel, parameter);
  }
  const [min, max] = [actuator.min, actuator.max].map((end) => (end === null ? null : constantOf(end)));
  if (typeof min === 'number' && typeof max === 'number' && min >= max) {
    const message = 'The lower end of the box must be below its upper end.';
    c.faults.error('seek-box', step.id, `${place}.min`, message);
    return;
  }
  const limit = limitOf(c, channel);
  const size = constantOf(amplitude);
  if (!limit || size === null) return;
  const reach = ditherShare(step.parameters.law.id, ditherOf(step.parameters.law.id, actuator)) * size;
  const low = Math.max(min ?? -Infinity, limit.min + reach);
  const high = Math.min(max ?? Infinity, limit.max - reach);
  if (low >= high) {
    const message = 'With the dither kept inside the envelope no room is left to seek in: widen the box.';
    c.faults.error('seek-box', step.id, `${place}.min`, message);
  }
}

function checkAmplitude(c: PreflightCase, step: Seek, actuator: SeekActuator, index: number): void {
  const { channel } = actuator;
  const { id } = step.parameters.law;
  const amplitude = constantOf(actuator.amplitude);
  if (amplitude === null) return;
  const field = `parameters.actuators[${index}].amplitude`;
  const kind = ditherOf(id, actuator);
  const grid = c.grids?.get(channel)?.step ?? 0;
  if (kind !== 'measured' && amplitude > 0 && amplitude < grid) {
    const message = `The dither is smaller than the actuator's grid of ${withUnit(c, channel, grid)}: make it larger.`;
    c.faults.error('dither-below-grid', step.id, field, message);
  }
  const limit = limitOf(c, channel);
  if (limit && ditherShare(id, kind) * amplitude > limit.ditherAmplitudeMax) {
    const most = withUnit(c, channel, limit.ditherAmplitudeMax);
    const message = `The envelope allows a dither amplitude of ${most} at most: make it smaller.`;
    c.faults.error('dither-above-envelope', step.id, field, message);
  }
}

/** A square is no square any more where changing sides takes longer than this share of its period. */
const changeShareMax = 0.25;

function checkSpeed(c: PreflightCase, step: Seek, actuator: SeekActuator, index: number): void {
  const { channel } = actuator;
  const { id } = step.parameters.law;
  const limit = limitOf(c, channel);
  const kind = ditherOf(id, actuator);
  const amplitude = constantOf(actuator.amplitude);
  const periodS = actuator.periodS === null ? null : constantOf(actuator.periodS);
  if (!limit || amplitude === null || periodS === null || !(periodS > 0) || !isPeriodic(id)) return;
  const field = `parameters.actuators[${index}].amplitude`;
  const speed = (amplitude * 2 * Math.PI) / periodS;
  if (kind === 'sine' && speed > limit.slewPerS) {
    const rates = `${withUnit(c, channel, speed)} a second, the slew limit is ${withUnit(c, channel, limit.slewPerS)}`;
    const message = `The dither would move at up to ${rates}: make it smaller or slower.`;
    c.faults.error('dither-slew', step.id, field, message);
  }
  const changeS = (2 * amplitude) / limit.slewPerS;
  if (kind === 'square' && changeS > changeShareMax * periodS) {
    const message = `At its slew limit the actuator takes ${Number(changeS.toPrecision(3))} s from one side of the square to the other: make the dither smaller or slower.`;
    c.faults.warning('dither-slew', step.id, field, message);
  }
}
