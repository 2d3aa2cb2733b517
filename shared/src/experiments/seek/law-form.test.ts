import { describe, expect, it } from 'vitest';
import { seekingLaws } from '../../seeking/seeking-laws.js';
import { lawFields, seekingLawIds } from './law-form.js';
import { seekActuatorFields } from './seek-fields.js';
import { seekParametersSchema } from './seek-parameters.schema.js';

describe.each(seekingLawIds)('the form of the law "%s"', (id) => {
  const fields = [...lawFields(id), ...seekActuatorFields(id)];

  it('has a title, a help text and a unit for every parameter, from the schema of the law', () => {
    expect(fields.length).toBeGreaterThan(2);
    for (const { name, title, help, unit } of fields) {
      expect(title).not.toBe(name);
      expect(help.length).toBeGreaterThan(10);
      expect(typeof unit).toBe('string');
    }
  });

  it('fills in what the law has a value for, and takes an expression for any number', () => {
    const parameters = Object.fromEntries(
      lawFields(id)
        .filter(({ type, initial }) => type === 'number' || initial === undefined)
        .map(({ name, type, options }) => [name, type === 'number' ? { expression: '1 / 2' } : options[0]]),
    );
    const seek = {
      law: { id, parameters },
      actuators: [{ channel: 'trim', amplitude: { expression: 'survey.noise * 4' } }],
      end: { afterS: 60, whenConverged: null, when: null },
      invalidForS: 5,
    };
    const { law, actuators } = seekParametersSchema.parse(seek);
    expect(Object.keys(law.parameters).sort()).toEqual(
      lawFields(id)
        .map(({ name }) => name)
        .sort(),
    );
    expect(law.parameters['taper']).toBeNull();
    expect(actuators[0]).toMatchObject({ min: null, max: null, phaseDeg: 0, dither: null, own: {} });
  });

  it('refuses a number out of the range that the law has', () => {
    for (const { name, type } of lawFields(id)) {
      if (type !== 'number' || name === 'seed') continue;
      const parameters = { dwellS: 1, rate: 1, inverseRate: 1, side: 'above', [name]: -1e15 };
      const outcome = seekParametersSchema.shape.law.safeParse({ id, parameters });
      expect(outcome.success).toBe(false);
      expect(outcome.error?.issues.some(({ path }) => path.includes(name))).toBe(true);
    }
  });

  it('belongs to a law that says what it is for and where it comes from', () => {
    expect(seekingLaws[id].purpose).toMatch(/\.$/);
    expect(seekingLaws[id].source.length).toBeGreaterThan(30);
  });
});
