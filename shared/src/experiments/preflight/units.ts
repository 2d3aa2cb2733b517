import { compileExpression, type UnitLookup } from '../../expressions/compile-expression.js';
import { channelSymbols } from '../../expressions/channel-symbols.js';
import { channelUnits } from '../../units/channel-units.js';
import { parseUnit } from '../../units/parse-unit.js';
import { isSameUnit, unitText, type Unit } from '../../units/unit.js';
import { objectiveSymbol } from '../expression-symbols.js';
import type { Step } from '../experiment.schema.js';
import { lawFields } from '../seek/law-form.js';
import { actuatorFieldName, seekActuatorFields } from '../seek/seek-fields.js';
import { resultNames } from '../step-kinds.js';
import { conditionFields, numericFields, valueFields } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';

/**
 * Units of every expression that the run would use. They are warnings, never errors: units of channels are texts
 * that were free so far, and a run that was right yesterday must not be refused today (docs/decisions, 7).
 */
export function checkUnits(c: PreflightCase): void {
  const channels = channelUnits(c.rig);
  const objective = objectiveUnit(c);
  const results = new Map(c.graph.steps.flatMap((step) => [...resultUnits(step, channels, objective)]));
  const unitOf: UnitLookup = (symbol) =>
    symbol === objectiveSymbol ? objective : (channels.get(symbol) ?? results.get(symbol) ?? null);
  const known = channelSymbols(c.rig).with([objectiveSymbol, ...results.keys()]);
  const judge = (step: Step | null, field: string, text: string, wanted: Unit | null) => {
    const message = unitFault(text, known, unitOf, wanted);
    if (message !== null) c.faults.warning('units', step?.id ?? null, field, message);
  };
  c.rig.channels.forEach((channel, i) => {
    if (channel.kind !== 'derived') return;
    judge(null, `rig.channels[${i}].expression`, channel.expression, channels.get(channel.id) ?? null);
  });
  c.envelope?.interlocks.forEach(({ condition }, i) =>
    judge(null, `envelope.interlocks[${i}].condition`, condition, null),
  );
  if (c.objective) judge(null, 'objective.expression', c.objective.expression, objective);
  c.objective?.validity.forEach(({ condition }, i) =>
    judge(null, `objective.validity[${i}].condition`, condition, null),
  );
  for (const step of c.graph.steps) {
    for (const { field, parameter } of numericFields(step)) {
      if (typeof parameter === 'number') continue;
      judge(step, field, parameter.expression, wantedUnit(step, field, channels));
    }
    for (const { field, text } of [...conditionFields(step), ...valueFields(step)]) {
      judge(step, field, text, null);
    }
  }
}

/** @returns what is wrong with the units of an expression that compiles without them; null where nothing is */
function unitFault(
  text: string,
  known: ReadonlySet<string>,
  unitOf: UnitLookup,
  wanted: Unit | null,
): string | null {
  const outcome = compileExpression(text, known, unitOf);
  if (!outcome.isOk) return outcome.isUnitFault ? `"${text}": ${outcome.message}` : null;
  const { unit, isCondition } = outcome.expression;
  if (isCondition || unit === null || wanted === null || isSameUnit(unit, wanted)) return null;
  const [is, should] = [unit, wanted].map((u) => unitText(u) || 'a pure number');
  return `"${text}" comes out in ${is} and stands for ${should}: convert it, or give a factor its unit with weight(…).`;
}

/** The unit that the objective says it has; none said is none known. */
function objectiveUnit({ objective }: PreflightCase): Unit | null {
  return objective && objective.unit !== '' ? parseUnit(objective.unit) : null;
}

const seconds = parseUnit('s');
const pure = parseUnit('');

/** Units of what a step leaves behind, by name. */
function resultUnits(
  step: Step,
  channels: ReadonlyMap<string, Unit>,
  objective: Unit | null,
): [string, Unit | null][] {
  return resultNames(step).map((name) => {
    const suffix = name.slice(step.id.length + 1);
    const [stem = '', channel] = suffix.split('.');
    if (suffix.endsWith('durationS')) return [name, seconds];
    if (suffix === 'mean' && step.kind === 'settle') {
      return [name, channels.get(step.parameters.channel) ?? null];
    }
    if (/^(best\.)?objective(AtStart)?$|^hysteresis$|^prominence$|^noise$/.test(suffix))
      return [name, objective];
    if (/^best$|^backlash(Error)?$/.test(stem) && channel !== undefined)
      return [name, channels.get(channel) ?? null];
    return [name, suffix.startsWith('is') || suffix === 'peaks' ? pure : null];
  });
}

/** The unit that a numeric parameter is taken in; null where it is not judged. */
function wantedUnit(step: Step, field: string, channels: ReadonlyMap<string, Unit>): Unit | null {
  const [, index, rest = ''] = /\[(\d+)\]\.(.*)$/.exec(field) ?? [];
  const at = Number(index ?? NaN);
  if (step.kind === 'move') return channels.get(step.parameters.targets[at]?.channel ?? '') ?? null;
  if (step.kind === 'survey') return channels.get(step.parameters.actuators[at]?.channel ?? '') ?? null;
  if (step.kind !== 'seek') return null;
  const { law, actuators } = step.parameters;
  const actuator = field.startsWith('parameters.actuators') ? actuators[at] : undefined;
  const ofActuator = channels.get(actuator?.channel ?? '') ?? null;
  if (rest === 'min' || rest === 'max') return ofActuator;
  const [name = ''] = /[^.]+$/.exec(field) ?? [];
  const form = actuator
    ? seekActuatorFields(law.id).find((one) => actuatorFieldName(one) === rest)
    : lawFields(law.id).find((one) => one.name === name);
  if (form?.unit === 's') return seconds;
  return form?.unit === 'actuator unit' ? ofActuator : null;
}
