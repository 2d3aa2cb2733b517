import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { lawCases } from './law.fixture.js';
import { newtonLaw } from './newton-law.js';
import { seekingLaws } from './seeking-laws.js';

interface JsonSchema {
  title?: string;
  description?: string;
  unit?: string;
  properties?: Record<string, JsonSchema>;
  items?: JsonSchema;
  anyOf?: JsonSchema[];
}

/** Every parameter of a schema with its path, those of lists and optional groups included. */
function fieldsOf(schema: JsonSchema, path: string): [string, JsonSchema][] {
  return [
    ...Object.entries(schema.properties ?? {}).flatMap(([name, field]): [string, JsonSchema][] => [
      [`${path}.${name}`, field],
      ...fieldsOf(field, `${path}.${name}`),
    ]),
    ...(schema.items ? fieldsOf(schema.items, `${path}[]`) : []),
    ...(schema.anyOf ?? []).flatMap((option) => fieldsOf(option, path)),
  ];
}

describe.each(Object.entries(seekingLaws))('the law %s', (id, law) => {
  it('names itself and its source', () => {
    expect(law.id).toBe(id);
    expect(law.title).not.toBe('');
    expect(law.purpose).toMatch(/\.$/);
    expect(law.source).toMatch(/\((19|20)\d\d\)/);
  });

  it('explains each parameter with title, unit and help', () => {
    const fields = fieldsOf(z.toJSONSchema(law.parametersSchema, { io: 'input' }) as JsonSchema, id);
    expect(fields.length).toBeGreaterThan(4);
    for (const [path, { title, unit, description }] of fields) {
      expect([path, title], path).toEqual([path, expect.stringMatching(/\S/)]);
      expect(typeof unit, path).toBe('string');
      expect(description, path).toMatch(/\.$/);
    }
  });

  it('names its signals apart, for one actuator and for several', () => {
    for (const actuators of [1, 2, law.actuatorsMax]) {
      const names = law.signalNames(actuators);
      expect(new Set(names).size).toBe(names.length);
      for (const name of names) expect(name).toMatch(/^[a-z][a-zA-Z0-9]*$/);
    }
    expect(law.signalNames(1)[0]).toBe('estimate');
  });
});

describe('parameters', () => {
  it('are refused where the box does not hold the dither', () => {
    for (const { id, law, parameters } of lawCases) {
      if (id.includes('measured')) continue;
      expect(() => parameters([{ min: 0, max: 0.1, amplitude: 0.1 }]), law.id).toThrow(
        'twice the dither amplitude',
      );
    }
  });

  it('are refused where a law cannot use the dither', () => {
    const newton = lawCases.find(({ id }) => id === 'newton');
    expect(() => newton?.parameters([{ dither: 'square' }])).toThrow('This law can use: sine.');
    const axis = { min: -1, max: 1, amplitude: 0.1, periodS: 1, curvature: 2 };
    const settings = (crossCurvatures: number[][]) =>
      newtonLaw.parametersSchema.safeParse({
        axes: [axis, axis],
        rate: 0.1,
        inverseRate: 0.1,
        crossCurvatures,
      });
    expect([[], [[1]], [[1, 2]], [[1], [1]]].map((rows) => settings(rows).success)).toEqual([
      true,
      true,
      false,
      false,
    ]);
  });
});
