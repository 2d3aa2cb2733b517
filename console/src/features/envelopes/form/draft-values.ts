import { envelopeContentSchema, type EnvelopeContent } from '@cresthold/shared';

export type FieldPath = readonly (string | number)[];

/** A document as a form holds it: numbers may be the text that is being typed. */
export type FormValue = string | number | boolean | null | FormValue[] | { [key: string]: FormValue };

/** Leaves of an envelope that are numbers, by name. */
const numberKeys = new Set([
  'min',
  'max',
  'slewPerS',
  'ditherAmplitudeMax',
  'rest',
  'stopCategory',
  'stopOrder',
  'readBackTolerance',
  'readBackWithinS',
  'delayS',
  'clearDelayS',
  'bypassAtMostS',
  'proofTestEveryDays',
  'proofTestGraceDays',
  'afterS',
  'periodS',
  'overrunLimit',
  'serverSilenceS',
]);

/** Leaves that are left empty to say that there is none. */
const nullableKeys = new Set(['clearCondition', 'bypassAtMostS', 'proofTestEveryDays']);

/**
 * A path as error messages write it.
 *
 * @example
 * fieldName(['limits', 0, 'min']) // 'limits[0].min'
 */
export function fieldName(path: FieldPath): string {
  return path
    .map((part) => (typeof part === 'number' ? `[${part}]` : `.${part}`))
    .join('')
    .replace(/^\./, '');
}

export function valueAt(value: FormValue, path: FieldPath): FormValue | undefined {
  return path.reduce<FormValue | undefined>((inner, part) => {
    if (typeof inner !== 'object' || inner === null) return undefined;
    return (inner as Record<string | number, FormValue>)[part];
  }, value);
}

/** A leaf as text; empty where there is none. */
export function textAt(value: FormValue, path: FieldPath): string {
  const leaf = valueAt(value, path);
  return typeof leaf === 'object' || leaf === undefined ? '' : String(leaf);
}

/** The same document with one leaf or list replaced; nothing else is copied anew. */
export function withValue(value: FormValue, path: FieldPath, leaf: FormValue): FormValue {
  const [part, ...rest] = path;
  if (part === undefined) return leaf;
  if (Array.isArray(value)) {
    return value.map((item, index) => (index === part ? withValue(item, rest, leaf) : item));
  }
  const holder = typeof value === 'object' && value !== null ? value : {};
  return { ...holder, [part]: withValue(holder[part] ?? null, rest, leaf) };
}

/** Text that was typed for numbers becomes numbers; what is none becomes NaN and so a fault at its field. */
export function withNumbers(value: FormValue, key: string | number = ''): FormValue {
  if (Array.isArray(value)) return value.map((item) => withNumbers(item));
  if (typeof value === 'object' && value !== null) {
    return Object.fromEntries(Object.entries(value).map(([name, inner]) => [name, withNumbers(inner, name)]));
  }
  if (typeof value !== 'string') return value;
  if (value.trim() === '' && nullableKeys.has(String(key))) return null;
  if (!numberKeys.has(String(key))) return value;
  const text = value.trim().replace(',', '.').replace('\u2212', '-');
  return text === '' ? NaN : Number(text);
}

export type CheckedDraft =
  { isOk: true; content: EnvelopeContent } | { isOk: false; faults: ReadonlyMap<string, string> };

/** Checks a draft by the schema that the server uses too. */
export function checkDraft(form: FormValue): CheckedDraft {
  const parsed = envelopeContentSchema.safeParse(withNumbers(form));
  if (parsed.success) return { isOk: true, content: parsed.data };
  const faults = new Map<string, string>();
  for (const issue of parsed.error.issues) {
    const name = fieldName(issue.path as FieldPath);
    const isNoNumber = issue.code === 'invalid_type' && numberKeys.has(String(issue.path.at(-1)));
    if (!faults.has(name)) faults.set(name, isNoNumber ? 'Enter a number.' : issue.message);
  }
  return { isOk: false, faults };
}
