import {
  calibrationContentSchema,
  conversionSchema,
  readTextTable,
  type CalibrationContent,
  type Conversion,
} from '@cresthold/shared';

/** A calibration as it is being typed. */
export interface CalibrationDraft {
  kind: Conversion['kind'];
  gain: string;
  offset: string;
  coefficients: string;
  from: string;
  to: string;
  /** Points of a table, one a line: raw and value. */
  points: string;
  type: string;
  junctionIs: 'fixed' | 'channel';
  celsius: string;
  junctionChannel: string;
  r0Ohm: string;
  calibratedOn: string;
  dueOn: string;
  expandedUncertainty: string;
  certificate: string;
  note: string;
}

export type DraftKey = keyof CalibrationDraft;

/** @param today ISO date */
export function emptyCalibration(today: string): CalibrationDraft {
  return {
    kind: 'linear',
    ...{ gain: '1', offset: '0', coefficients: '', from: '', to: '', points: '' },
    ...{ type: 'K', junctionIs: 'fixed', celsius: '', junctionChannel: '', r0Ohm: '100' },
    ...{ calibratedOn: today, dueOn: '', expandedUncertainty: '', certificate: '', note: '' },
  };
}

/** A number as it was typed; NaN where it is none. */
export function numberOf(text: string): number {
  const plain = text.trim().replace('\u2212', '-').replace(',', '.');
  return plain === '' ? NaN : Number(plain);
}

/**
 * Points that were typed or pasted from a spreadsheet: two columns, tab, semicolon, comma or spaces between them.
 *
 * @example
 * pointsOf('0\t4\n10\t20') // [{ raw: 0, value: 4 }, { raw: 10, value: 20 }]
 */
export function pointsOf(text: string): { raw: number; value: number }[] {
  const spaced = /[,;\t]/.test(text) ? text : text.replace(/[^\S\r\n]+/g, '\t');
  try {
    return readTextTable(spaced).records.map(({ cells: [raw = '', value = ''] }) => ({
      raw: numberOf(raw),
      value: numberOf(value),
    }));
  } catch {
    return [];
  }
}

function listOf(text: string): number[] {
  const parts = text.includes(';') || /\s/.test(text.trim()) ? text.split(/[;\s]+/) : text.split(',');
  return parts.filter((part) => part.trim() !== '').map(numberOf);
}

function conversionOf(draft: CalibrationDraft): unknown {
  const { kind } = draft;
  switch (kind) {
    case 'linear':
      return { kind, gain: numberOf(draft.gain), offset: numberOf(draft.offset) };
    case 'polynomial':
      return {
        kind,
        coefficients: listOf(draft.coefficients),
        from: numberOf(draft.from),
        to: numberOf(draft.to),
      };
    case 'table':
      return { kind, points: pointsOf(draft.points) };
    case 'thermocouple':
      return {
        kind,
        type: draft.type,
        coldJunction:
          draft.junctionIs === 'fixed'
            ? { celsius: numberOf(draft.celsius) }
            : { channel: draft.junctionChannel },
      };
    case 'platinum':
      return { kind, r0Ohm: numberOf(draft.r0Ohm) };
  }
}

/** The conversion of a draft; null while it is none. */
export function readConversion(draft: CalibrationDraft): Conversion | null {
  return conversionSchema.safeParse(conversionOf(draft)).data ?? null;
}

export type CheckedCalibration =
  { content: CalibrationContent; faults: null } | { content: null; faults: ReadonlyMap<DraftKey, string> };

/** Checks a draft by the schema that the server uses too; faults by the field of the form. */
export function checkCalibration(draft: CalibrationDraft): CheckedCalibration {
  const { calibratedOn, certificate, note } = draft;
  const parsed = calibrationContentSchema.safeParse({
    conversion: conversionOf(draft),
    calibratedOn,
    dueOn: draft.dueOn === '' ? null : draft.dueOn,
    expandedUncertainty: draft.expandedUncertainty.trim() === '' ? null : numberOf(draft.expandedUncertainty),
    certificate,
    note,
  });
  if (parsed.success) return { content: parsed.data, faults: null };
  const faults = new Map<DraftKey, string>();
  for (const { path, message, code } of parsed.error.issues) {
    const key = draftKeyOf(path.join('.'));
    const text = code === 'invalid_type' ? 'Give a number.' : message;
    const line = /points\.(\d+)/.exec(path.join('.'))?.[1];
    if (!faults.has(key)) faults.set(key, line === undefined ? text : `Line ${Number(line) + 1}: ${text}`);
  }
  return { content: null, faults };
}

/**
 * The field of the form that a fault stands at.
 *
 * @example
 * draftKeyOf('content.conversion.points[3].raw') // 'points'
 */
export function draftKeyOf(field: string): DraftKey {
  const path = field.replace(/^content\./, '').replace(/^conversion\.?/, '');
  if (path.startsWith('points')) return 'points';
  if (path.startsWith('coefficients')) return 'coefficients';
  if (path.startsWith('coldJunction')) return path.endsWith('channel') ? 'junctionChannel' : 'celsius';
  return path in emptyCalibration('') ? (path as DraftKey) : 'kind';
}
