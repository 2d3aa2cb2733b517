import { isInsideRange } from '../envelopes/guard.js';
import type { ArmingConditions } from '../envelopes/rig-state-machine.js';
import type { FieldFault } from '../errors/domain-error.js';
import type { EngineState } from './engine-state.js';
import type { FittedEnvelope } from './fitted-envelope.js';

export interface ArmingChecklist {
  conditions: ArmingConditions;
  /** What forbids arming and what to do about it; empty where nothing does. */
  obstacles: FieldFault[];
}

/** Goes through all that arming needs, in the order in which a technician would clear it. */
export function checkArming(engine: EngineState): ArmingChecklist {
  const { fitted } = engine;
  const beside = besideObstacles(engine);
  const sensors = fitted ? sensorObstacles(fitted) : [];
  const interlocks = fitted ? [...emergencyStopObstacles(fitted), ...interlockObstacles(fitted)] : [];
  const other = [...serverObstacles(engine), ...(fitted ? actuatorObstacles(engine, fitted) : [])];
  return {
    conditions: {
      isEnvelopeInForce: fitted !== null,
      areSensorsFresh: sensors.length === 0,
      areInterlocksClear: interlocks.length === 0,
      hasOtherObstacle: other.length > 0,
    },
    obstacles: [...beside, ...sensors, ...interlocks, ...other],
  };
}

function besideObstacles(engine: EngineState): FieldFault[] {
  const faults: FieldFault[] = [];
  const add = (field: string, message: string) => faults.push({ field, message });
  if (!engine.fitted) add('envelope', 'No approved envelope is in force: have one approved first.');
  if (engine.rigState.isLockedOut) {
    add('lockout', 'The rig is locked out: the person named on the lockout must lift it.');
  }
  if (engine.rigState.trip) add('trip', 'The rig is tripped: have the trip reset first.');
  for (const id of engine.wires.lostIds()) {
    add(`connections.${id}`, `Connection "${id}" is down: check power, cable and address.`);
  }
  return faults;
}

function serverObstacles(engine: EngineState): FieldFault[] {
  const limitS = engine.fitted?.inForce.content.serverSilenceS ?? Infinity;
  if (engine.serverSilentS <= limitS) return [];
  return [{ field: 'server', message: 'The server is silent: wait until it answers again.' }];
}

function sensorObstacles(fitted: FittedEnvelope): FieldFault[] {
  const faults: FieldFault[] = [];
  fitted.staleness.forEachStale(({ channel, afterS }) => {
    const message = `Sensor "${channel}" has given no good value for over ${afterS} s: check it and its wire.`;
    faults.push({ field: `channels.${channel}`, message });
  });
  return faults;
}

function emergencyStopObstacles(fitted: FittedEnvelope): FieldFault[] {
  const faults: FieldFault[] = [];
  fitted.emergencyStops.forEachNotReleased(({ channel, title }, isKnown) => {
    const message = isKnown
      ? `${title} is pressed: release it where it was pressed.`
      : `${title} cannot be read: check "${channel}" and its wire.`;
    faults.push({ field: `channels.${channel}`, message });
  });
  return faults;
}

function interlockObstacles(fitted: FittedEnvelope): FieldFault[] {
  if (!fitted.interlocks.hasJudged) {
    return [{ field: 'interlocks', message: 'The interlocks have not been judged yet: wait for one scan.' }];
  }
  const faults: FieldFault[] = [];
  fitted.interlocks.forEachViolated(({ id, message }) => {
    faults.push({ field: `interlocks.${id}`, message: `Interlock "${id}" is not clear: ${message}` });
  });
  return faults;
}

function actuatorObstacles(engine: EngineState, fitted: FittedEnvelope): FieldFault[] {
  const faults: FieldFault[] = [];
  for (const { channel, readingIndex, limit } of fitted.actuators) {
    const value = engine.readings.goodValue(readingIndex);
    const add = (message: string) => faults.push({ field: `channels.${channel}`, message });
    if (Number.isNaN(value)) {
      add(`Actuator "${channel}" cannot be read back: check it and its wire.`);
    } else if (!isInsideRange(limit, value) && limit.whenFoundOutside === 'refuse') {
      add(
        `Actuator "${channel}" is at ${value}, outside ${limit.min} to ${limit.max}: bring it inside by hand.`,
      );
    }
  }
  return faults;
}
