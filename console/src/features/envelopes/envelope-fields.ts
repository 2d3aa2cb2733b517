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
  options?: readonly { value: string | number; label: string }[];
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
  { key: 'message', label: 'What the technician reads' },
];

/** The unit of a field, with the channel's own put in. */
export function unitOf(field: { unit?: string }, channelUnit: string): string {
  if (field.unit === undefined) return '';
  return field.unit.replace('channel', channelUnit).replace(/^\/s$/, '1/s');
}
