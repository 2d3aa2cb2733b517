import { describe, expect, it } from 'vitest';
import { objectiveContentSchema } from '../../objectives/objective.schema.js';
import { rigSchema } from '../../rigs/rig.schema.js';
import { experimentGraphSchema } from '../experiment.schema.js';
import { preflight } from '../preflight.js';

const base = { display: { min: 0, max: 100, decimals: 1 } };
const wired = { ...base, connection: 'plc', address: {} };
const rig = (loss: string) =>
  rigSchema.parse({
    id: 'burner-1',
    title: 'Burner',
    periodMs: 50,
    connections: [{ id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} }],
    channels: [
      { kind: 'actuator', id: 'trim', title: 'Trim', unit: '%', ...wired },
      { kind: 'sensor', id: 'flue', title: 'Flue', unit: '°C', ...wired },
      { kind: 'sensor', id: 'co', title: 'CO', unit: 'ppm', ...wired },
      { kind: 'derived', id: 'loss', title: 'Loss', unit: '%', ...base, expression: loss },
    ],
  });
const warningsOf = (texts: {
  loss?: string;
  objective?: string;
  condition?: string;
  target?: string;
  criterion?: string;
}) => {
  const position = { x: 0, y: 0 };
  const graph = experimentGraphSchema.parse({
    steps: [
      { kind: 'start', id: 'start', position, parameters: {} },
      {
        kind: 'move',
        id: 'move',
        position,
        parameters: {
          targets: [{ channel: 'trim', value: { expression: texts.target ?? 'loss * 2' } }],
          rampS: 1,
          timeoutS: 10,
        },
      },
      {
        kind: 'check',
        id: 'check',
        position,
        parameters: { criterion: texts.criterion ?? 'move.durationS < 5' },
      },
      { kind: 'finish', id: 'finish', position, parameters: {} },
    ],
    edges: [],
  });
  const objective = objectiveContentSchema.parse({
    title: 'Loss',
    direction: 'minimise',
    expression: texts.objective ?? 'loss + max(0, co - 100) / 50',
    unit: '%',
    validity: [{ condition: texts.condition ?? 'co < 400', message: 'Too much CO.' }],
  });
  const faults = preflight({
    graph,
    objective,
    rig: rig(texts.loss ?? 'weight(0.05) * flue'),
    envelope: null,
  });
  return faults.filter(({ code }) => code === 'preflight.units');
};

describe('units in preflight', () => {
  it('has nothing to remark where they fit', () => expect(warningsOf({})).toEqual([]));

  it.each([
    [{ loss: '0.05 * flue' }, null, 'rig.channels[3].expression', '°C'],
    [{ objective: 'loss + co' }, null, 'objective.expression', 'ppm cannot be added to %'],
    [{ objective: 'flue' }, null, 'objective.expression', 'comes out in °C and stands for %'],
    [{ condition: 'co < flue' }, null, 'objective.validity[0].condition', '°C cannot be compared with ppm'],
    [{ target: 'flue' }, 'move', 'parameters.targets[0].value', 'comes out in °C and stands for %'],
    [{ criterion: 'move.durationS < co' }, 'check', 'parameters.criterion', 'ppm cannot be compared with s'],
    [{ criterion: 'objective < flue' }, 'check', 'parameters.criterion', '°C cannot be compared with %'],
  ])('warns of %j', (texts, step, field, message) => {
    expect(warningsOf(texts)).toEqual([
      {
        severity: 'warning',
        code: 'preflight.units',
        step,
        field,
        message: expect.stringContaining(message) as string,
      },
    ]);
  });
});
