import { describe, expect, it } from 'vitest';
import { wireFaultForms } from './wire-fault-forms.js';
import { wireFaultSchema } from './wire-fault.schema.js';

describe('a fault of a wire', () => {
  it('strikes always, at once and everywhere where nothing else is said', () => {
    expect(wireFaultSchema.parse({ kind: 'corrupt' })).toEqual({
      kind: 'corrupt',
      probability: 1,
      seed: 1,
      fromS: 0,
      untilS: null,
      channels: null,
    });
  });

  it.each([
    [{ kind: 'delay' }, 'delayMs'],
    [{ kind: 'delay', delayMs: 0 }, 'delayMs'],
    [{ kind: 'corrupt', probability: 1.1 }, 'probability'],
    [{ kind: 'corrupt', fromS: 3, untilS: 3 }, 'untilS'],
    [{ kind: 'wrong-scale', factor: 0 }, 'factor'],
    [{ kind: 'corrupt', channels: [] }, 'channels'],
    [{ kind: 'gremlins' }, 'kind'],
  ])('%j is refused at %s', (fault, field) => {
    expect(wireFaultSchema.safeParse(fault).error?.issues.map(({ path }) => path.join('.'))).toEqual([field]);
  });

  it('has a form for each kind, with a title and words for it and for each field', () => {
    expect(new Set(wireFaultForms.map(({ kind }) => kind)).size).toBe(11);
    for (const { title, help, schema } of wireFaultForms) {
      expect(title).not.toBe('');
      expect(help).toMatch(/\.$/);
      for (const field of Object.values(schema.properties)) expect(field).toHaveProperty('title');
    }
  });
});
