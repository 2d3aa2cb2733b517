import {
  envelopeInForceSchema,
  experimentGraphSchema,
  rigSchema,
  type EnvelopeInForce,
  type ExperimentGraph,
  type Rig,
} from '@cresthold/shared';

const display = { min: 0, max: 100, decimals: 2 };

/** Two sensors as floats, two actuators and a heartbeat as words: one merged read. */
export function testRig(port: number, periodMs = 20): Rig {
  const register = (address: number, type: string, scale = 1) => ({
    table: 'holding-register',
    address,
    type,
    scale,
  });
  const wired = (id: string, address: object) => ({ id, title: id, display, connection: 'main', address });
  return rigSchema.parse({
    id: 'rig-1',
    title: 'Rig under test',
    periodMs,
    connections: [
      {
        id: 'main',
        title: 'Main',
        adapter: 'modbus-tcp',
        configuration: { host: '127.0.0.1', port, timeoutMs: 1000 },
      },
    ],
    channels: [
      { kind: 'sensor', ...wired('oxygen', register(0, 'f32')) },
      { kind: 'sensor', ...wired('stackTemperature', register(2, 'f32')) },
      { kind: 'actuator', ...wired('airTrim', register(4, 'i16', 0.01)) },
      { kind: 'actuator', ...wired('fuelTrim', register(5, 'i16', 0.01)) },
      { kind: 'actuator', ...wired('heartbeat', register(6, 'u16')) },
      { kind: 'derived', id: 'excess', title: 'excess', display, expression: 'oxygen - 2' },
    ],
  });
}

export function testEnvelope(): EnvelopeInForce {
  const limit = {
    min: -10,
    max: 10,
    slewPerS: 20,
    ditherAmplitudeMax: 1,
    rest: 0,
    stopCategory: 1,
    readBackTolerance: 0.5,
    readBackWithinS: 5,
  };
  return envelopeInForceSchema.parse({
    id: 'envelope-1',
    version: 1,
    content: {
      limits: [
        { channel: 'airTrim', ...limit },
        { channel: 'fuelTrim', ...limit, stopOrder: 1 },
      ],
      interlocks: [
        {
          id: 'hot-stack',
          title: 'Hot stack',
          condition: 'stackTemperature > 300',
          delayS: 0.5,
          action: 'trip',
          message: 'The stack is too hot.',
        },
      ],
      staleness: [{ channel: 'oxygen', afterS: 2 }],
      heartbeat: { channel: 'heartbeat', periodS: 0.1 },
      overrunLimit: 1000,
      serverSilenceS: 6,
    },
  });
}

/** Moves the air trim to 4, holds it for a time, finishes. */
export function testGraph(holdS: number): ExperimentGraph {
  const position = { x: 0, y: 0 };
  const target = { channel: 'airTrim', value: 4 };
  return experimentGraphSchema.parse({
    steps: [
      { kind: 'start', id: 'start', position, parameters: {} },
      { kind: 'move', id: 'move', position, parameters: { targets: [target], rampS: 0.2, timeoutS: 20 } },
      { kind: 'hold', id: 'hold', position, parameters: { durationS: holdS } },
      { kind: 'finish', id: 'finish', position, parameters: {} },
    ],
    edges: [
      { id: 'a', from: 'start', port: 'done', to: 'move' },
      { id: 'b', from: 'move', port: 'done', to: 'hold' },
      { id: 'c', from: 'hold', port: 'done', to: 'finish' },
    ],
  });
}
