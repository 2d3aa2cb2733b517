import { envelopeInForceSchema, rigSchema, type EnvelopeInForce, type Rig } from '@cresthold/shared';

const display = { min: 0, max: 100, decimals: 2 };
const axis = { title: 'Place', unit: 'mm', from: -5, step: 0.5 };

/** A valve, a trace of 512 points, and where its peak is; in memory. */
export function traceRig(store: string, change: { beam?: object } = {}): Rig {
  const wired = { connection: 'main', display };
  return rigSchema.parse({
    id: 'trace-rig',
    title: 'Rig with a trace',
    periodMs: 20,
    connections: [{ id: 'main', title: 'Main', adapter: 'in-memory', configuration: { store } }],
    channels: [
      { kind: 'actuator', id: 'valve', title: 'Valve', unit: '%', ...wired, address: { name: 'valve' } },
      {
        kind: 'trace',
        id: 'beam',
        title: 'Beam',
        unit: 'mV',
        axis,
        ...wired,
        address: { name: 'beam', points: 512 },
        ...change.beam,
      },
      { kind: 'derived', id: 'beamAt', title: 'Peak', unit: 'mm', display, expression: 'peakAt(beam)' },
    ],
  });
}

export function traceEnvelope(): EnvelopeInForce {
  const limit = {
    channel: 'valve',
    min: 0,
    max: 100,
    slewPerS: 100,
    ditherAmplitudeMax: 1,
    rest: 0,
    stopCategory: 1,
    readBackTolerance: 5,
    readBackWithinS: 5,
  };
  const content = {
    limits: [limit],
    interlocks: [],
    staleness: [],
    heartbeat: null,
    overrunLimit: 1000,
    serverSilenceS: 60,
  };
  return envelopeInForceSchema.parse({ id: 'envelope-1', version: 1, content });
}
