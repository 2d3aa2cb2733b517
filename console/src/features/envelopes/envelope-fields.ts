import type { EnvelopeContent } from '@cresthold/shared';

type Limit = EnvelopeContent['limits'][number];
type Interlock = EnvelopeContent['interlocks'][number];

/** How one field of an envelope is named and entered. */
export interface FieldFacts<Key extends string> {
  key: Key;
  label: string;
  /** Said where the label alone might be misread. */
  hint?: string;
  /** `channel` stands for the channel's own unit. */
  unit?: string;
  options?: readonly { value: string | number | boolean; label: string }[];
}

export const stopCategories = [
  { value: 0, label: '0 · at once' },
  { value: 1, label: '1 · ramp, let go' },
  { value: 2, label: '2 · ramp, hold' },
] as const;

/** Fields of an actuator's limit, in the order of the table. */
export const limitFields: readonly FieldFacts<keyof Limit>[] = [
  { key: 'min', label: 'Lower limit', unit: 'channel' },
  { key: 'max', label: 'Upper limit', unit: 'channel' },
  { key: 'slewPerS', label: 'Slew limit', unit: 'channel/s' },
  { key: 'ditherAmplitudeMax', label: 'Dither amplitude, greatest', unit: 'channel' },
  { key: 'rest', label: 'Rest value', unit: 'channel' },
  { key: 'stopCategory', label: 'Stop category', options: stopCategories, hint: 'As in IEC 60204-1.' },
  { key: 'stopOrder', label: 'Stop order', hint: 'Lower numbers stop first.' },
  { key: 'readBackTolerance', label: 'Read-back tolerance', unit: 'channel' },
  { key: 'readBackWithinS', label: 'Read back within', unit: 's' },
  {
    key: 'whenFoundOutside',
    label: 'Found outside',
    options: [
      { value: 'refuse', label: 'refuse' },
      { value: 'slew-in', label: 'slew in' },
    ],
  },
];

export const interlockFields: readonly FieldFacts<keyof Interlock>[] = [
  { key: 'title', label: 'Title' },
  { key: 'id', label: 'Id' },
  { key: 'condition', label: 'Unsafe when' },
  { key: 'delayS', label: 'for', unit: 's' },
  {
    key: 'action',
    label: 'Action',
    options: ['warn', 'pause', 'stop', 'trip'].map((value) => ({ value, label: value })),
  },
  {
    key: 'protects',
    label: 'Protects',
    options: ['people', 'equipment', 'process'].map((value) => ({ value, label: value })),
    hint: 'A trip that protects people is never bypassed.',
  },
  {
    key: 'clearCondition',
    label: 'Clears only when',
    hint: 'Hysteresis, e.g. "co < 350". Empty: as soon as it is no longer unsafe.',
  },
  { key: 'clearDelayS', label: 'and that for', unit: 's' },
  {
    key: 'isLatching',
    label: 'Latches',
    options: [
      { value: false, label: 'no' },
      { value: true, label: 'until acknowledged' },
    ],
    hint: 'A trip latches in any case.',
  },
  { key: 'bypassAtMostS', label: 'Bypass at most', unit: 's', hint: 'Empty: never bypassed.' },
  { key: 'proofTestEveryDays', label: 'Proof test every', unit: 'days', hint: 'Empty: none asked for.' },
  {
    key: 'proofTestGraceDays',
    label: 'Grace',
    unit: 'days',
    hint: 'After that an overdue test forbids arming.',
  },
  { key: 'message', label: 'What the technician reads' },
];

/** Fields of an interlock that are numbers. */
export const interlockNumbers: ReadonlySet<keyof Interlock> = new Set([
  'delayS',
  'clearDelayS',
  'bypassAtMostS',
  'proofTestEveryDays',
  'proofTestGraceDays',
] as const);

/** Fields of an input from a hard-wired emergency stop, beside its channel. */
export const emergencyStopFields: readonly FieldFacts<'title' | 'pressedWhen'>[] = [
  { key: 'title', label: 'Title' },
  {
    key: 'pressedWhen',
    label: 'Pressed when it reads',
    options: [
      { value: 'zero', label: '0' },
      { value: 'not-zero', label: 'anything but 0' },
    ],
    hint: 'A circuit that reads 0 when pressed also shows a broken wire.',
  },
];

/** The unit of a field, with the channel's own put in. */
export function unitOf(field: { unit?: string }, channelUnit: string): string {
  if (field.unit === undefined) return '';
  return field.unit.replace('channel', channelUnit).replace(/^\/s$/, '1/s');
}
