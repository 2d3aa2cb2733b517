import {
  envelopeInForceSchema,
  rigSchema,
  runOrderSchema,
  type EnvelopeInForce,
  type Rig,
  type RunOrder,
} from '@cresthold/shared';

const display = { min: 0, max: 1000, decimals: 0 };

/** Eight neighbouring registers, so that one request reads them all; the first one is an actuator. */
export function freeRunRig(host: string, port: number): Rig {
  const channels = Array.from({ length: 8 }, (_, i) => ({
    kind: i === 0 ? 'actuator' : 'sensor',
    id: `channel${i}`,
    title: `Channel ${i}`,
    display,
    connection: 'main',
    address: { table: 'holding-register', address: i, type: 'u16' },
  }));
  const main = { id: 'main', title: 'Main', adapter: 'modbus-tcp', configuration: { host, port } };
  return rigSchema.parse({ id: 'free-run', title: 'Free run', periodMs: 1, connections: [main], channels });
}

/** Wide limits: a benchmark must not trip because the bare loop wrote the same register. */
export function freeRunEnvelope(): EnvelopeInForce {
  const limit = {
    channel: 'channel0',
    min: 0,
    max: 1000,
    slewPerS: 10_000,
    ditherAmplitudeMax: 0,
    rest: 500,
    stopCategory: 2,
    readBackTolerance: 100_000,
    whenFoundOutside: 'slew-in',
  };
  const interlock = {
    id: 'high',
    title: 'High',
    condition: 'channel1 > 60000',
    delayS: 1,
    action: 'trip',
    message: 'Channel 1 is too high.',
  };
  return envelopeInForceSchema.parse({
    id: 'free-run',
    version: 1,
    content: {
      limits: [limit],
      interlocks: [interlock],
      staleness: [{ channel: 'channel1', afterS: 60 }],
      heartbeat: null,
      overrunLimit: 1000,
      serverSilenceS: 60,
    },
  });
}

/** An experiment that holds its actuator, and so writes it in each scan, for longer than any benchmark. */
export function freeRunOrder(file: string): RunOrder {
  const position = { x: 0, y: 0 };
  return runOrderSchema.parse({
    runId: 'free-run',
    file,
    by: 'benchmark',
    experiment: {
      id: 'free-run',
      title: 'Free run',
      version: 1,
      graph: {
        steps: [
          { kind: 'start', id: 'start', position, parameters: {} },
          { kind: 'hold', id: 'hold', position, parameters: { durationS: 86_400 } },
          { kind: 'finish', id: 'finish', position, parameters: {} },
        ],
        edges: [
          { id: 'a', from: 'start', port: 'done', to: 'hold' },
          { id: 'b', from: 'hold', port: 'done', to: 'finish' },
        ],
      },
    },
    objective: null,
    manifest: {},
  });
}
