import type { ActuatorLimit, Channel, EnvelopeContent, Rig } from '@cresthold/shared';

/** A beginning for an actuator's limit: its display range, slow, without dither; to be narrowed. */
export function firstLimit({ id, display: { min, max } }: Channel): ActuatorLimit {
  return {
    channel: id,
    min,
    max,
    slewPerS: (max - min) / 20,
    ditherAmplitudeMax: 0,
    rest: min,
    stopCategory: 1,
    stopOrder: 0,
    readBackTolerance: (max - min) / 50,
    readBackWithinS: 2,
    whenFoundOutside: 'refuse',
  };
}

/** A beginning for a rig's first envelope: the display ranges as limits, every sensor watched; to be narrowed. */
export function firstEnvelope(rig: Rig): EnvelopeContent {
  const actuators = rig.channels.filter(({ kind }) => kind === 'actuator');
  const sensors = rig.channels.filter(({ kind }) => kind === 'sensor');
  return {
    limits: actuators.map(firstLimit),
    interlocks: [],
    staleness: sensors.map(({ id }) => ({ channel: id, afterS: 1 })),
    emergencyStopInputs: [],
    heartbeat: null,
    overrunLimit: 20,
    serverSilenceS: 3,
  };
}
