import type { EnvelopeContent, EnvelopeInForce } from '../envelopes/envelope.schema.js';
import { type InterlockConditions, InterlockJudge } from '../envelopes/interlock-judge.js';
import { StalenessJudge } from '../envelopes/staleness-judge.js';
import { EmergencyStopInputs } from '../envelopes/emergency-stop-inputs.js';
import { DomainError, type FieldFault } from '../errors/domain-error.js';
import { channelSymbols } from '../expressions/channel-symbols.js';
import type { Rig } from '../rigs/rig.schema.js';
import { createActuatorBank, type HeldActuator } from './actuator-bank.js';
import { compileAll } from './compile-all.js';
import { Heartbeat } from './heartbeat.js';
import type { Readings } from './readings.js';
import type { ValueGrid } from './scan-engine.types.js';

/** An envelope made ready for the scans of one rig. */
export interface FittedEnvelope {
  readonly inForce: EnvelopeInForce;
  readonly actuators: readonly HeldActuator[];
  readonly interlocks: InterlockJudge;
  readonly staleness: StalenessJudge;
  readonly emergencyStops: EmergencyStopInputs;
  readonly heartbeat: Heartbeat | null;
}

/**
 * Fits an envelope to a rig.
 *
 * @throws channel.not-found where the envelope names what is no actuator or no channel of the rig
 * @throws expression.invalid where an interlock's condition cannot be understood
 */
export function fitEnvelope(
  inForce: EnvelopeInForce,
  rig: Rig,
  grids: ReadonlyMap<string, ValueGrid>,
  readings: Readings,
): FittedEnvelope {
  const { content } = inForce;
  const faults = channelFaults(inForce, rig);
  if (faults.length > 0) throw new DomainError('channel.not-found', undefined, faults);
  return {
    inForce,
    actuators: createActuatorBank(rig, content.limits, grids, readings),
    interlocks: new InterlockJudge(content.interlocks, interlockConditions(content, rig), readings),
    staleness: new StalenessJudge(content.staleness, readings),
    emergencyStops: new EmergencyStopInputs(content.emergencyStopInputs, readings),
    heartbeat: heartbeatOf(inForce, rig),
  };
}

/** Conditions and, in the same order behind them, those clear conditions that there are. */
function interlockConditions({ interlocks }: EnvelopeContent, rig: Rig): InterlockConditions[] {
  const asked = (field: 'condition' | 'clearCondition') =>
    interlocks.flatMap((interlock, index) => {
      const text = interlock[field];
      return text === null ? [] : [{ field: `interlocks[${index}].${field}`, text, isCondition: true }];
    });
  const compiled = compileAll([...asked('condition'), ...asked('clearCondition')], channelSymbols(rig));
  const clearing = compiled.splice(interlocks.length);
  return compiled.map((condition, index) => {
    const hasClearing = typeof interlocks[index]?.clearCondition === 'string';
    const clearCondition = hasClearing ? (clearing.shift() ?? null) : null;
    return { condition, clearCondition };
  });
}

function heartbeatOf({ content }: EnvelopeInForce, rig: Rig): Heartbeat | null {
  const channel = rig.channels.find(({ id }) => id === content.heartbeat?.channel);
  if (!content.heartbeat || channel?.kind !== 'actuator') return null;
  return new Heartbeat(channel.id, channel.connection, content.heartbeat.periodS);
}

function channelFaults({ content }: EnvelopeInForce, rig: Rig): FieldFault[] {
  const kinds = new Map(rig.channels.map((channel) => [channel.id, channel.kind]));
  const faults: FieldFault[] = [];
  const needActuator = (channel: string, field: string) => {
    if (kinds.get(channel) === 'actuator') return;
    faults.push({ field, message: `The rig has no actuator "${channel}": name one of its actuators.` });
  };
  content.limits.forEach(({ channel }, index) => needActuator(channel, `limits[${index}].channel`));
  if (content.heartbeat) needActuator(content.heartbeat.channel, 'heartbeat.channel');
  content.emergencyStopInputs.forEach(({ channel }, index) => {
    if (kinds.get(channel) === 'sensor') return;
    const field = `emergencyStopInputs[${index}].channel`;
    faults.push({ field, message: `The rig has no sensor "${channel}": name one of its sensors.` });
  });
  content.staleness.forEach(({ channel }, index) => {
    if (kinds.has(channel)) return;
    const field = `staleness[${index}].channel`;
    faults.push({ field, message: `The rig has no channel "${channel}": name one of its channels.` });
  });
  return faults;
}
