import { scenarioSchema, type Scenario } from '@cresthold/shared';

export const scanPeriodMs = 50;
/** Where the actuator stands while a run goes on; its rest is 0, which a stop of category 0 writes at once. */
export const runningValue = 50;

const display = { min: 0, max: 100, decimals: 0 };
const wired = (address: number) => ({
  connection: 'main',
  display,
  unit: '%',
  address: { table: 'holding-register', address, type: 'i16' },
});

/** A rig for each port, each with one actuator, and an experiment that holds it away from rest. */
export function stopScenario(ports: readonly number[]): Scenario {
  return scenarioSchema.parse({
    users: [
      { account: 'engineer', title: 'Engineer', roles: ['test-engineer'] },
      { account: 'officer', title: 'Officer', roles: ['safety-officer'] },
      { account: 'administrator', title: 'Administrator', roles: ['administrator'] },
    ],
    rigs: ports.map((port, index) => rigOf(`stop-${index + 1}`, port)),
    start: null,
  });
}

function rigOf(id: string, port: number) {
  return {
    rig: {
      id,
      title: id,
      periodMs: scanPeriodMs,
      connections: [
        { id: 'main', title: 'Main', adapter: 'modbus-tcp', configuration: { host: '127.0.0.1', port } },
      ],
      channels: [
        { kind: 'actuator', id: 'valve', title: 'Valve', ...wired(0) },
        { kind: 'sensor', id: 'flow', title: 'Flow', ...wired(1) },
      ],
    },
    envelope: { content: envelope, author: 'engineer', approvedBy: 'officer', reason: 'For the benchmark.' },
    objectives: [],
    experiments: [{ key: 'hold', objectiveKey: null, content: experiment, author: 'engineer' }],
  };
}

const envelope = {
  limits: [
    {
      channel: 'valve',
      min: 0,
      max: 100,
      slewPerS: 200,
      ditherAmplitudeMax: 0,
      rest: 0,
      stopCategory: 0,
      readBackTolerance: 1,
      readBackWithinS: 30,
    },
  ],
  interlocks: [],
  staleness: [],
  heartbeat: null,
  overrunLimit: 1000,
  serverSilenceS: 60,
};

const position = { x: 0, y: 0 };
const targets = [{ channel: 'valve', value: runningValue }];
const experiment = {
  title: 'Hold away from rest',
  description: '',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', position, parameters: {} },
      { kind: 'move', id: 'move', position, parameters: { targets, rampS: 0.1, timeoutS: 60 } },
      { kind: 'hold', id: 'hold', position, parameters: { durationS: 3600 } },
      { kind: 'finish', id: 'finish', position, parameters: {} },
    ],
    edges: [
      { id: 'a', from: 'start', port: 'done', to: 'move' },
      { id: 'b', from: 'move', port: 'done', to: 'hold' },
      { id: 'c', from: 'hold', port: 'done', to: 'finish' },
    ],
  },
};
