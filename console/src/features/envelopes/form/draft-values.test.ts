import { describe, expect, it } from 'vitest';
import { demoEnvelope } from '../../../testing/documents.js';
import { checkDraft, fieldName, valueAt, withValue, type FormValue } from './draft-values.js';

const form = demoEnvelope.content as unknown as FormValue;

describe('a draft in the form', () => {
  it('passes as it came', () => {
    expect(checkDraft(form)).toEqual({ isOk: true, content: demoEnvelope.content });
  });

  it('takes numbers as typed, with comma or true minus', () => {
    const typed = withValue(withValue(form, ['limits', 0, 'min'], '\u22121,5'), ['limits', 0, 'rest'], '0');
    const checked = checkDraft(typed);
    expect(checked.isOk && checked.content.limits[0]?.min).toBe(-1.5);
  });

  it.each([
    [['limits', 0, 'min'], '99', 'limits[0].min', 'The lower limit must be below the upper limit.'],
    [['limits', 0, 'rest'], '99', 'limits[0].rest', 'The rest value must lie inside the limits.'],
    [['limits', 0, 'slewPerS'], '', 'limits[0].slewPerS', 'Enter a number.'],
    [['serverSilenceS'], 'soon', 'serverSilenceS', 'Enter a number.'],
  ] as const)('finds the fault at %j set to "%s"', (path, text, field, message) => {
    const checked = checkDraft(withValue(form, path, text));
    expect(checked.isOk ? null : checked.faults.get(field)).toBe(message);
  });

  it('changes one leaf and leaves the rest and the original alone', () => {
    const changed = withValue(form, ['interlocks', 0, 'delayS'], '7');
    expect(valueAt(changed, ['interlocks', 0, 'delayS'])).toBe('7');
    expect(valueAt(form, ['interlocks', 0, 'delayS'])).toBe(demoEnvelope.content.interlocks[0]?.delayS);
    expect(valueAt(changed, ['limits'])).toBe(valueAt(form, ['limits']));
  });

  it('names fields as the server does', () => {
    expect(fieldName(['limits', 0, 'min'])).toBe('limits[0].min');
  });
});
