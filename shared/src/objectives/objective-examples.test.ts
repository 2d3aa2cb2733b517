import { describe, expect, it } from 'vitest';
import { compileExpression } from '../expressions/compile-expression.js';
import { Quality } from '../rigs/quality.js';
import { rigSchema } from '../rigs/rig.schema.js';
import { Readings } from '../scan/readings.js';
import { channelUnits } from '../units/channel-units.js';
import { unitText } from '../units/unit.js';
import { compileObjective } from './objective-evaluator.js';
import { objectiveExamples, type ObjectiveExample } from './objective-examples.js';

const rigOf = ({ channels }: ObjectiveExample) =>
  rigSchema.parse({
    id: 'example',
    title: 'Example',
    periodMs: 50,
    connections: [{ id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} }],
    channels: Object.entries(channels).map(([id, unit]) => ({
      kind: 'sensor',
      id,
      title: id,
      unit,
      display: { min: 0, max: 100, decimals: 1 },
      connection: 'plc',
      address: {},
    })),
  });

const samplesOf = (
  example: ObjectiveExample,
  expression = example.expression,
  validity = example.validity,
) => {
  const rig = rigOf(example);
  const { title, direction, unit } = example;
  const outcome = compileObjective({ title, direction, expression, unit, validity: [...validity] }, rig);
  if (!outcome.isOk) throw new Error(outcome.faults[0]?.message);
  const readings = new Readings(rig.channels.map(({ id }) => id));
  return example.way.map(({ point }) => {
    rig.channels.forEach(({ id }, i) => readings.set(i, point[id] ?? NaN, Quality.good));
    return { ...outcome.objective.evaluate(readings) };
  });
};
const bestOf = (samples: { value: number; isValid: boolean }[], direction: string) => {
  const sign = direction === 'maximise' ? 1 : -1;
  const scores = samples.map(({ value, isValid }) => (isValid ? sign * value : -Infinity));
  return scores.indexOf(Math.max(...scores));
};

describe.each(objectiveExamples.map((example) => [example.title, example] as const))('%s', (_, example) => {
  it('has the value and validity that it says at every point', () => {
    const samples = samplesOf(example);
    example.way.forEach(({ value, isValid }, i) => {
      expect(samples[i]?.value).toBeCloseTo(value, 9);
      expect(samples[i]?.isValid).toBe(isValid);
    });
  });

  it('keeps off the cliff over which the plain quantity leads', () => {
    expect(bestOf(samplesOf(example), example.direction)).toBe(example.best);
    const plain = bestOf(samplesOf(example, example.plain, []), example.direction);
    expect(plain).not.toBe(example.best);
    expect(example.way[plain]?.isValid).toBe(false);
  });

  it('needs its validity conditions for that, and no more than one of them at a time', () => {
    for (const { condition } of example.validity) {
      const others = example.validity.filter((other) => other.condition !== condition);
      const samples = samplesOf(example, example.expression, others);
      expect(samples.some(({ isValid }, i) => isValid && !example.way[i]?.isValid)).toBe(true);
    }
  });

  it('has its units in order', () => {
    const units = channelUnits(rigOf(example));
    for (const text of [example.expression, ...example.validity.map(({ condition }) => condition)]) {
      const outcome = compileExpression(text, new Set(units.keys()), (name) => units.get(name) ?? null);
      expect(outcome).toMatchObject({ isOk: true });
    }
    const outcome = compileExpression(
      example.expression,
      new Set(units.keys()),
      (name) => units.get(name) ?? null,
    );
    const unit = outcome.isOk ? outcome.expression.unit : null;
    if (unit) expect(unitText(unit)).toBe(example.unit);
  });
});
