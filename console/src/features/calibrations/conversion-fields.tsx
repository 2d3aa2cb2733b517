import TextField from '@mui/material/TextField';
import { thermocoupleTypes, type Rig } from '@cresthold/shared';
import { conversionTitles } from './conversion-text.js';
import type { CalibrationDraft, DraftKey } from './calibration-draft.js';

export interface CalibrationFieldsProps {
  rig: Rig;
  /** The sensor that is calibrated. */
  channel: string;
  draft: CalibrationDraft;
  faultAt: (key: DraftKey) => string | undefined;
  set: (key: DraftKey, value: string) => void;
}

interface FieldDefinition {
  key: DraftKey;
  label: string;
  help?: string;
  options?: readonly { value: string; label: string }[];
  isText?: boolean;
  lines?: number;
  isDate?: boolean;
}

/** The fields of one kind of conversion. */
export function ConversionFields(props: CalibrationFieldsProps) {
  return fieldsFor(props).map((field) => <DraftField key={field.key} field={field} {...props} />);
}

const dates: readonly FieldDefinition[] = [
  { key: 'calibratedOn', label: 'Calibrated on', isDate: true },
  {
    key: 'dueOn',
    label: 'Due on',
    isDate: true,
    help: 'Overdue from this day; empty where it does not expire.',
  },
  {
    key: 'expandedUncertainty',
    label: 'Expanded uncertainty (k = 2)',
    help: 'In the unit of the channel; may be empty.',
  },
  { key: 'certificate', label: 'Certificate', isText: true, help: 'Number and issuer as they stand on it.' },
  { key: 'note', label: 'Note', isText: true },
];

/** When it was done, until when it holds, and what says so. */
export function RecordFields(props: CalibrationFieldsProps) {
  return dates.map((field) => <DraftField key={field.key} field={field} {...props} />);
}

function fieldsFor({ draft, rig, channel }: CalibrationFieldsProps): FieldDefinition[] {
  const kinds = Object.entries(conversionTitles).map(([value, label]) => ({ value, label }));
  return [{ key: 'kind', label: 'Conversion', options: kinds }, ...kindFields(draft, rig, channel)];
}

function kindFields(draft: CalibrationDraft, rig: Rig, channel: string): FieldDefinition[] {
  switch (draft.kind) {
    case 'linear':
      return [
        { key: 'gain', label: 'Gain', help: 'Value = gain · raw + offset.' },
        { key: 'offset', label: 'Offset' },
      ];
    case 'polynomial':
      return [
        {
          key: 'coefficients',
          label: 'Coefficients',
          isText: true,
          help: 'From the constant upward, with spaces or semicolons between.',
        },
        { key: 'from', label: 'Valid from, raw' },
        { key: 'to', label: 'Valid to, raw' },
      ];
    case 'table':
      return [
        {
          key: 'points',
          label: 'Points',
          lines: 5,
          help: 'One a line: raw and value, as pasted from a spreadsheet. Straight lines between them.',
        },
      ];
    case 'thermocouple':
      return [
        {
          key: 'type',
          label: 'Type',
          options: thermocoupleTypes.map((type) => ({ value: type, label: type })),
        },
        ...junctionFields(draft, rig, channel),
      ];
    case 'platinum':
      return [{ key: 'r0Ohm', label: 'Resistance at 0 °C, ohm', help: '100 for a Pt100.' }];
  }
}

function junctionFields({ junctionIs }: CalibrationDraft, rig: Rig, channel: string): FieldDefinition[] {
  const sensors = rig.channels.filter(({ kind, id }) => kind === 'sensor' && id !== channel);
  const options = [
    { value: 'fixed', label: 'kept at a temperature' },
    { value: 'channel', label: 'measured by a channel' },
  ];
  const where: FieldDefinition =
    junctionIs === 'fixed'
      ? { key: 'celsius', label: 'Its temperature, °C' }
      : {
          key: 'junctionChannel',
          label: 'Channel that measures it',
          options: [
            { value: '', label: 'choose' },
            ...sensors.map(({ id, title }) => ({ value: id, label: title })),
          ],
        };
  return [{ key: 'junctionIs', label: 'Cold junction', options }, where];
}

function DraftField({ field, draft, faultAt, set }: CalibrationFieldsProps & { field: FieldDefinition }) {
  const { key, label, help, options, isText = false, lines, isDate = false } = field;
  const fault = faultAt(key);
  return (
    <TextField
      label={label}
      select={options !== undefined}
      multiline={lines !== undefined}
      minRows={lines}
      maxRows={12}
      type={isDate ? 'date' : undefined}
      value={draft[key]}
      onChange={(event) => set(key, event.target.value)}
      error={fault !== undefined}
      helperText={fault ?? help}
      fullWidth
      slotProps={{
        select: { native: true },
        inputLabel: options || isDate ? { shrink: true } : undefined,
        htmlInput: {
          autoComplete: 'off',
          spellCheck: false,
          inputMode: options || isText || isDate || lines ? undefined : 'decimal',
        },
      }}
    >
      {options?.map(({ value, label: shown }) => (
        <option key={value} value={value}>
          {shown}
        </option>
      ))}
    </TextField>
  );
}
