import { useState } from 'react';
import { fireEvent, render, screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { FieldFault } from '@cresthold/shared';
import { initialValue, type FormValue } from './field-value.js';
import type { JsonSchema } from './json-schema.types.js';
import { SchemaForm } from './schema-form.js';

const schema: JsonSchema = {
  type: 'object',
  properties: {
    host: { type: 'string', minLength: 1, title: 'Host', description: 'Name or address.' },
    port: { type: 'integer', minimum: 1, maximum: 65_535, default: 502, title: 'Port' },
    gain: { type: 'number' },
    parity: { type: 'string', enum: ['none', 'even'], default: 'none', title: 'Parity' },
    stopBits: { type: 'number', enum: [1, 2] },
    hasEcho: { type: 'boolean', default: false, title: 'Echo' },
    hasMaskWrite: { type: 'boolean', title: 'Mask write' },
    bits: {
      type: 'object',
      title: 'Bit field',
      properties: { from: { type: 'integer' }, count: { type: 'integer', default: 1 } },
      required: ['from'],
    },
    units: {
      type: 'array',
      title: 'Slow units',
      default: [],
      maxItems: 2,
      items: { type: 'object', properties: { unit: { type: 'integer', title: 'Unit' } }, required: ['unit'] },
    },
    words: { type: 'object', title: 'Words', default: {}, additionalProperties: { type: 'number' } },
    odd: { title: 'Odd' },
  },
  required: ['host'],
};

const root = 'connections[0].configuration';

function renderForm(value: FormValue = initialValue(schema), faults: FieldFault[] = [], isReadOnly = false) {
  const held: { value: FormValue } = { value };
  function Held() {
    const [current, setCurrent] = useState(value);
    held.value = current;
    return (
      <SchemaForm
        schema={schema}
        value={current}
        onChange={setCurrent}
        root={root}
        faults={faults}
        isReadOnly={isReadOnly}
      />
    );
  }
  render(<Held />);
  return held;
}

const field = (name: string | RegExp) => screen.getByLabelText<HTMLInputElement>(name);
const type = (name: string | RegExp, text: string) =>
  fireEvent.change(field(name), { target: { value: text } });
const press = (name: string) => fireEvent.click(screen.getByRole('button', { name }));

describe('a form drawn from a schema', () => {
  it('begins with the defaults, and shows title, help and range', () => {
    const held = renderForm();
    expect(held.value).toEqual({ port: 502, parity: 'none', hasEcho: false, units: [], words: {} });
    expect(field('Port').value).toBe('502');
    expect(screen.getByText('Name or address.')).toBeDefined();
    expect(screen.getByText('1 to 65535.')).toBeDefined();
    expect(field(/^Host/).required).toBe(true);
    expect(field('Gain').required).toBe(false);
  });

  it('gives numbers as numbers, with comma or point, and leaves out what is emptied', () => {
    const held = renderForm();
    type('Gain', '2,5');
    expect(held.value['gain']).toBe(2.5);
    type('Gain', '1.');
    expect([held.value['gain'], field('Gain').value]).toEqual([1, '1.']);
    type('Gain', '');
    expect('gain' in held.value).toBe(false);
    type('Gain', 'much');
    expect(held.value['gain']).toBe('much');
  });

  it('gives choices as they are in the schema', () => {
    const held = renderForm();
    type('Parity', '1');
    type('Stop bits', '1');
    type('Mask write', '1');
    expect(held.value).toMatchObject({ parity: 'even', stopBits: 2, hasMaskWrite: false });
    type('Stop bits', '');
    expect('stopBits' in held.value).toBe(false);
    fireEvent.click(field('Echo'));
    expect(held.value['hasEcho']).toBe(true);
  });

  it('takes an object within in and out', () => {
    const held = renderForm();
    fireEvent.click(field('Use bit field'));
    expect(held.value['bits']).toEqual({ count: 1 });
    type(/^From/, '3');
    expect(held.value['bits']).toEqual({ count: 1, from: 3 });
    fireEvent.click(field('Use bit field'));
    expect('bits' in held.value).toBe(false);
  });

  it('lengthens and shortens lists, up to their limit', () => {
    const held = renderForm();
    press('Add to slow units');
    press('Add to slow units');
    expect(screen.queryByRole('button', { name: 'Add to slow units' })).toBeNull();
    const second = screen.getByRole('group', { name: 'Slow units 2' });
    fireEvent.change(within(second).getByLabelText(/^Unit/), { target: { value: '7' } });
    press('Remove Slow units 1');
    expect(held.value['units']).toEqual([{ unit: 7 }]);
  });

  it('holds names of one’s own', () => {
    const held = renderForm();
    type('New name for words', 'ON');
    press('Add');
    type(/^ON/, '1');
    expect(held.value['words']).toEqual({ ON: 1 });
    press('Remove ON');
    expect(held.value['words']).toEqual({});
  });

  it('takes what no field can be drawn for as JSON', () => {
    const held = renderForm();
    type('Odd (JSON)', '{"a":');
    expect(screen.getByText('This is no JSON yet.')).toBeDefined();
    type('Odd (JSON)', '{"a":1}');
    expect(held.value['odd']).toEqual({ a: 1 });
  });

  it('shows what the server said at the field that it belongs to', () => {
    renderForm({ host: '', units: [{ unit: 300 }] }, [
      { field: `${root}.host`, message: 'Give a host.' },
      { field: `content.${root}.units[0].unit`, message: 'At most 255.' },
      { field: `${root}.units`, message: 'Too slow.' },
    ]);
    const host = field(/^Host/);
    expect(host.getAttribute('aria-invalid')).toBe('true');
    expect(document.getElementById(host.getAttribute('aria-describedby') ?? '')?.textContent).toBe(
      'Give a host.',
    );
    expect(field(/^Unit/).getAttribute('aria-invalid')).toBe('true');
    expect(screen.getByText('Too slow.')).toBeDefined();
  });

  it('cannot be changed where it is only to be read', () => {
    renderForm({ host: 'rig', units: [{ unit: 1 }] }, [], true);
    // A field of several lines measures itself in a hidden one.
    const open = screen
      .getAllByRole<HTMLInputElement>('textbox')
      .filter((input) => !input.disabled && input.getAttribute('aria-hidden') === null);
    expect(open.map((input) => input.outerHTML)).toEqual([]);
    expect(screen.queryAllByRole('button')).toEqual([]);
  });
});
