import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Quality } from '../rigs/quality.js';
import { rigSchema, type Rig } from '../rigs/rig.schema.js';
import { Readings } from '../scan/readings.js';
import { compileObjective, type ObjectiveEvaluator } from './objective-evaluator.js';
import { objectiveContentSchema, type ObjectiveContent } from './objective.schema.js';

const channel = (id: string) => ({
  kind: 'sensor',
  id,
  title: id,
  display: { min: 0, max: 100, decimals: 1 },
  connection: 'plc',
  address: {},
});
const rig: Rig = rigSchema.parse({
  id: 'burner-1',
  title: 'Burner',
  periodMs: 50,
  connections: [{ id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} }],
  channels: ['efficiency', 'co', 'flame'].map(channel),
});
const content = (change: Partial<ObjectiveContent> = {}): ObjectiveContent =>
  objectiveContentSchema.parse({
    title: 'Efficiency',
    direction: 'maximise',
    expression: 'efficiency - max(0, co - 100) / 50',
    validity: [
      { condition: 'flame > 0.5', message: 'The flame is out.' },
      { condition: 'co < 400', message: 'CO is too high.' },
    ],
    ...change,
  });
const compiled = (): ObjectiveEvaluator => {
  const outcome = compileObjective(content(), rig);
  if (!outcome.isOk) throw new Error(outcome.faults[0]?.message);
  return outcome.objective;
};
const readings = (values: number[], qualities: Quality[] = []) => {
  const scan = new Readings(rig.channels.map((c) => c.id));
  values.forEach((value, i) => scan.set(i, value, qualities[i] ?? Quality.good));
  return scan;
};

describe('an objective', () => {
  it('is good and valid where its readings are good and its conditions true', () => {
    expect(compiled().evaluate(readings([90, 150, 1]))).toEqual({
      value: 89,
      isGood: true,
      isValid: true,
      whyInvalid: null,
    });
  });

  it('keeps its value but is not valid where a condition is false, and says which', () => {
    const sample = compiled().evaluate(readings([90, 500, 1]));
    expect(sample).toEqual({ value: 82, isGood: true, isValid: false, whyInvalid: 'CO is too high.' });
  });

  it('is not valid where a condition rests on a bad reading', () => {
    const sample = compiled().evaluate(readings([90, 50, 1], [0, 0, Quality.stale]));
    expect(sample).toEqual({ value: 90, isGood: true, isValid: false, whyInvalid: 'The flame is out.' });
  });

  it('reads each of its channels once and reuses its output', () => {
    const objective = compiled();
    expect(objective.channels).toEqual(['efficiency', 'co', 'flame']);
    expect(objective.evaluate(readings([1, 1, 1]))).toBe(objective.evaluate(readings([2, 2, 2])));
  });

  it('never gives a number that rests on a reading that is not good', () => {
    const quality = fc.constantFrom(...Object.values(Quality));
    fc.assert(
      fc.property(fc.array(fc.tuple(fc.double(), quality), { minLength: 3, maxLength: 3 }), (scan) => {
        const all = readings(
          scan.map(([value]) => value),
          scan.map(([, q]) => q),
        );
        const sample = compiled().evaluate(all);
        expect(sample.isGood).toBe(Number.isFinite(sample.value));
        if (sample.isGood) expect(all.isGood(0) && all.isGood(1)).toBe(true);
        if (sample.isValid) expect(all.isGood(2) && sample.isGood).toBe(true);
      }),
    );
  });
});

describe('a faulty objective', () => {
  it('names every field at fault and what is known instead', () => {
    const validity = [
      { condition: 'flame > 0.5', message: 'The flame is out.' },
      { condition: 'c0 < 400', message: 'CO is too high.' },
      { condition: 'co', message: 'CO is too high.' },
    ];
    const outcome = compileObjective(content({ expression: 'eficiency', validity }), rig);
    expect(outcome).toEqual({
      isOk: false,
      faults: [
        { field: 'expression', message: '"eficiency" is not known here. Did you mean efficiency?' },
        { field: 'validity[1].condition', message: '"c0" is not known here. Did you mean co?' },
        {
          field: 'validity[2].condition',
          message: 'This is no condition: compare with something, e.g. "co < 400".',
        },
      ],
    });
  });
});
