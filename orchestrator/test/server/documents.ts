import type { envelopeContentSchema, experimentContentSchema, rigSchema } from '@cresthold/shared';
import type { z } from 'zod';

type RigInput = z.input<typeof rigSchema>;
type EnvelopeInput = z.input<typeof envelopeContentSchema>;
type ExperimentInput = z.input<typeof experimentContentSchema>;

const display = { min: 0, max: 100, decimals: 1 };

/** A rig on the adapter that is no wire at all. */
export function rigInput(overrides: Partial<RigInput> = {}): RigInput {
  const wired = (name: string) => ({ connection: 'memory', address: { name } });
  return {
    id: 'kiln-1',
    title: 'Kiln 1',
    periodMs: 50,
    connections: [
      { id: 'memory', title: 'Memory', adapter: 'in-memory', configuration: { store: 'kiln-1' } },
    ],
    channels: [
      { kind: 'actuator', id: 'airTrim', title: 'Air trim', unit: '%', display, ...wired('airTrim') },
      { kind: 'sensor', id: 'o2', title: 'Oxygen', unit: '%', display, ...wired('o2') },
      { kind: 'sensor', id: 'co', title: 'Carbon monoxide', unit: 'ppm', display, ...wired('co') },
      { kind: 'derived', id: 'loss', title: 'Loss', unit: '%', display, expression: '2 * o2' },
    ],
    ...overrides,
  };
}

type LimitInput = EnvelopeInput['limits'][number];

export function limitInput(overrides: Partial<LimitInput> = {}): LimitInput {
  return {
    channel: 'airTrim',
    min: 10,
    max: 60,
    slewPerS: 5,
    ditherAmplitudeMax: 2,
    rest: 40,
    stopCategory: 2,
    readBackTolerance: 0.5,
    ...overrides,
  };
}

export function envelopeInput(overrides: Partial<EnvelopeInput> = {}): EnvelopeInput {
  return {
    limits: [limitInput()],
    interlocks: [
      {
        id: 'co-high',
        title: 'CO high',
        condition: 'co > 400',
        delayS: 1,
        action: 'trip',
        message: 'Too much CO: open the air.',
      },
    ],
    staleness: [{ channel: 'o2', afterS: 2 }],
    heartbeat: null,
    overrunLimit: 20,
    serverSilenceS: 5,
    ...overrides,
  };
}

const position = { x: 0, y: 0 };

export function experimentInput(overrides: Partial<ExperimentInput> = {}): ExperimentInput {
  return {
    title: 'Hold for a while',
    objectiveId: null,
    graph: {
      steps: [
        { kind: 'start', id: 'start', position, parameters: {} },
        { kind: 'hold', id: 'hold', position, parameters: { durationS: 5 } },
        { kind: 'finish', id: 'finish', position, parameters: {} },
      ],
      edges: [
        { id: 'e1', from: 'start', port: 'done', to: 'hold' },
        { id: 'e2', from: 'hold', port: 'done', to: 'finish' },
      ],
    },
    ...overrides,
  };
}

export const objectiveInput = {
  title: 'Least loss',
  direction: 'minimise' as const,
  expression: 'loss',
  unit: '%',
};
