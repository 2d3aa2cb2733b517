import type { FieldFault } from '../errors/domain-error.js';
import { actuatorsOf, type EngineState } from './engine-state.js';
import { isStopCompleteWhereReachable } from './stop-action.js';
import { isReadBackOutside } from './watchdogs.js';

/**
 * What of the latched trip, first cause and later ones, is still there, and so forbids its reset.
 * An unfinished stop action forbids it too: a reset must not leave an actuator half-way. So does the run
 * that records it.
 */
export function presentCauses(engine: EngineState): FieldFault[] {
  const { trip } = engine.rigState;
  if (!trip) return [];
  const causes = [trip.cause, ...trip.later.map(({ cause }) => cause)];
  const faults = causes.flatMap((cause) => {
    const message = whyPresent(engine, cause);
    return message ? [{ field: cause, message }] : [];
  });
  if (engine.run) {
    faults.push({ field: 'run', message: 'The run is still recorded: wait until it has ended.' });
  }
  if (!isStopCompleteWhereReachable(actuatorsOf(engine))) {
    const message = 'The stop action is not complete: wait until every actuator is read back at rest.';
    faults.push({ field: 'stop-action', message });
  }
  return faults;
}

function whyPresent(engine: EngineState, cause: string): string | null {
  const { fitted, wires } = engine;
  const colon = cause.indexOf(':');
  const kind = colon < 0 ? cause : cause.slice(0, colon);
  const name = cause.slice(colon + 1);
  switch (kind) {
    case 'connection':
      return wires.isLost(name) ? `Connection "${name}" is still down.` : null;
    case 'emergency-stop-input':
      return fitted?.emergencyStops.isPressed(name)
        ? `The emergency stop at "${name}" is still pressed.`
        : null;
    case 'interlock':
      return fitted && fitted.interlocks.stateOf(name) !== 'clear'
        ? `Interlock "${name}" is still not clear.`
        : null;
    case 'stale':
      return fitted?.staleness.isStale(name) ? `Sensor "${name}" still gives no good value.` : null;
    case 'read-back': {
      const actuator = actuatorsOf(engine).find(({ channel }) => channel === name);
      const isOutside = actuator && isReadBackOutside(engine, actuator);
      return isOutside ? `Actuator "${name}" is still not where it was sent.` : null;
    }
    case 'overrun':
      return engine.consecutiveOverruns > 0 ? 'The scans still come late.' : null;
    case 'server-silent':
      return engine.serverSilentS > (fitted?.inForce.content.serverSilenceS ?? Infinity)
        ? 'The server is still silent.'
        : null;
    default:
      return null;
  }
}
