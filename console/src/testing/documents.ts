import type { Rig, RigStatus } from '@cresthold/shared';
import type { EnvelopeDocument, RigDocument, Session } from '../api/index.js';

/** Documents of an invented rig for the console's tests. */
export const demoRig: Rig = {
  id: 'burner-1',
  title: 'Burner 1',
  description: 'Test burner of the Brackwater Test Station',
  isBench: false,
  periodMs: 50,
  connections: [{ id: 'plc', title: 'Burner controller', adapter: 'modbus-tcp', configuration: {} }],
  channels: [
    {
      kind: 'sensor',
      id: 'o2',
      title: 'Oxygen in flue gas',
      unit: '%',
      display: { min: 0, max: 10, decimals: 2 },
      connection: 'plc',
      address: {},
    },
    {
      kind: 'sensor',
      id: 'co',
      title: 'Carbon monoxide',
      unit: 'ppm',
      display: { min: 0, max: 1000, decimals: 0 },
      connection: 'plc',
      address: {},
    },
    {
      kind: 'actuator',
      id: 'airTrim',
      title: 'Air trim',
      unit: '%',
      display: { min: -10, max: 30, decimals: 1 },
      connection: 'plc',
      address: {},
    },
  ],
};

export const demoStatus: RigStatus = {
  rigId: 'burner-1',
  phase: 'idle',
  isLockedOut: false,
  trip: null,
  runId: null,
  activeSteps: [],
  isPaused: false,
  envelopeVersion: 3,
  connections: [{ id: 'plc', isConnected: true, error: null, injectedFault: null }],
  channelFaults: [],
  interlocks: [{ id: 'co-high', state: 'clear', isBypassed: false, bypass: null, isForced: false }],
  heldMoves: [],
  armingObstacles: [],
  bestPoint: {},
  scan: { count: 100, overruns: 0, latenessP99Ms: 0.4, wireMeanMs: 1.2 },
};

export const demoRigDocument: RigDocument = {
  id: 'burner-1',
  revision: 1,
  content: demoRig,
  status: demoStatus,
};

export const demoEnvelope: EnvelopeDocument = {
  id: 'env-3',
  rigId: 'burner-1',
  version: 3,
  status: 'in-force',
  revision: 2,
  author: 'test-engineer',
  submittedBy: 'test-engineer',
  decidedBy: 'safety-officer',
  reason: 'Checked at the rig',
  createdAt: '2026-03-01T08:00:00.000Z',
  decidedAt: '2026-03-01T09:00:00.000Z',
  content: {
    limits: [
      {
        channel: 'airTrim',
        min: -5,
        max: 20,
        slewPerS: 2,
        ditherAmplitudeMax: 1,
        rest: 10,
        stopCategory: 1,
        stopOrder: 0,
        readBackTolerance: 0.5,
        readBackWithinS: 2,
        whenFoundOutside: 'refuse',
      },
    ],
    interlocks: [
      {
        id: 'co-high',
        title: 'Carbon monoxide high',
        condition: 'co > 400',
        delayS: 2,
        clearCondition: null,
        clearDelayS: 0,
        isLatching: false,
        protects: 'people',
        bypassAtMostS: null,
        proofTestEveryDays: null,
        proofTestGraceDays: 7,
        action: 'trip',
        message: 'Open the air damper and look at the flame.',
      },
    ],
    staleness: [{ channel: 'o2', afterS: 1 }],
    emergencyStopInputs: [],
    heartbeat: null,
    overrunLimit: 20,
    serverSilenceS: 3,
  },
};

export function sessionOf(...roles: Session['roles']): Session {
  const [first = 'reader'] = roles;
  return { account: first, title: first.replace('-', ' '), roles, rigLimits: [] };
}
