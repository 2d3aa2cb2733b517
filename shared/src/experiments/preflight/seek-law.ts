import { seekingLaws } from '../../seeking/seeking-laws.js';
import type { StepOf } from '../experiment.schema.js';
import { replaceExpressions } from '../seek/expression-tree.js';
import { seekNumericFields } from '../seek/seek-expressions.js';
import {
  actuatorFieldName,
  actuatorValue,
  ditherChoices,
  ditherOf,
  seekActuatorFields,
  type SeekActuatorField,
} from '../seek/seek-fields.js';
import type { SeekActuator } from '../seek/seek-parameters.schema.js';
import { constantOf } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';

type Seek = StepOf<'seek'>;

/** Whether the law can do what is asked of it, and has what it needs. */
export function checkSeekLaw(c: PreflightCase, step: Seek): void {
  const { law, actuators, constraint } = step.parameters;
  const { title, actuatorsMax } = seekingLaws[law.id];
  if (actuators.length > actuatorsMax) {
    const message = `${title} steers ${actuatorsMax} actuators at most: take some out or choose another law.`;
    c.faults.error('law-actuators', step.id, 'parameters.actuators', message);
  }
  actuators.forEach((actuator, index) => {
    checkDitherKind(c, step, actuator, index);
    for (const field of seekActuatorFields(law.id)) checkField(c, step, actuator, index, field);
  });
  if (law.id === 'constrained' && constraint === null) {
    const message = 'Say which quantity is to stay on its side of which bound: the law needs both.';
    c.faults.error('no-constraint', step.id, 'parameters.constraint', message);
  }
  if (law.id !== 'constrained' && constraint !== null) {
    const message = `${title} keeps no bound: choose the constrained law, or take the constraint out.`;
    c.faults.error('unused-constraint', step.id, 'parameters.constraint', message);
  }
  checkTogether(c, step);
}

function checkDitherKind(c: PreflightCase, step: Seek, actuator: SeekActuator, index: number): void {
  const { id } = step.parameters.law;
  const kinds = ditherChoices(id);
  if (kinds.includes(ditherOf(id, actuator))) return;
  const message = `${seekingLaws[id].title} cannot use this dither: choose ${kinds.join(' or ')}.`;
  c.faults.error('law-dither', step.id, `parameters.actuators[${index}].dither`, message);
}

function checkField(
  c: PreflightCase,
  step: Seek,
  actuator: SeekActuator,
  index: number,
  field: SeekActuatorField,
): void {
  const place = `parameters.actuators[${index}].${actuatorFieldName(field)}`;
  const parameter = actuatorValue(actuator, field) ?? null;
  if (parameter === null) {
    if (field.isNullable || field.initial !== undefined) return;
    const message = `${seekingLaws[step.parameters.law.id].title} needs this: ${field.help}`;
    c.faults.error('law-parameter', step.id, place, message);
    return;
  }
  const value = constantOf(parameter);
  // What an expression that gives no number is worth is said elsewhere.
  if (value === null || Number.isNaN(value)) return;
  const outcome = field.schema.safeParse(inTheLawsUnit(field, value, c.rig.periodMs));
  if (outcome.success) return;
  if (value <= 0 && field.schema.safeParse(1).success) {
    c.faults.error('not-positive', step.id, place, 'This must be above zero.');
    return;
  }
  c.faults.error(
    'law-parameter',
    step.id,
    place,
    outcome.error.issues[0]?.message ?? 'The law cannot take this.',
  );
}

function inTheLawsUnit({ name, place }: SeekActuatorField, value: number, periodMs: number): number {
  if (name === 'phaseRad') return (value * Math.PI) / 180;
  // Too few scans a period is a matter of timing, and said there.
  return name === 'scansPerPeriod' && place[0] === 'periodS' && value > 0
    ? Math.max((value * 1000) / periodMs, 3)
    : value;
}

/** What only the whole of a law's parameters shows, e.g. a settling time that is longer than the dwell. */
function checkTogether(c: PreflightCase, step: Seek): void {
  const { law } = step.parameters;
  if (seekNumericFields(step.parameters).some(({ parameter }) => constantOf(parameter) === null)) return;
  const numbers = replaceExpressions(law.parameters, '', (parameter) => constantOf(parameter) ?? NaN);
  const outcome = seekingLaws[law.id].parametersSchema.safeParse({ ...numbers, axes: [] });
  for (const { path, message } of outcome.error?.issues ?? []) {
    if (path[0] === 'axes') continue;
    c.faults.error(
      'law-parameter',
      step.id,
      ['parameters.law.parameters', ...path.map(String)].join('.'),
      message,
    );
  }
}
