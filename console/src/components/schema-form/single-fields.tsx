import { useId, useState } from 'react';
import Box from '@mui/material/Box';
import FormControlLabel from '@mui/material/FormControlLabel';
import FormHelperText from '@mui/material/FormHelperText';
import Switch from '@mui/material/Switch';
import TextField from '@mui/material/TextField';
import { readNumber } from './field-value.js';
import { useFormContext, type FieldProps } from './form-context.js';
import type { FieldOf, SchemaField } from './schema-field.js';

function textOf(value: unknown): string {
  return typeof value === 'string' || typeof value === 'number' ? String(value) : '';
}

/** A text or a number, as it is typed. */
export function TypedField({ field, path, value, onChange }: FieldProps<FieldOf<'text' | 'number'>>) {
  const { isReadOnly, faultAt } = useFormContext();
  const fault = faultAt(path);
  const isNumber = field.kind === 'number';
  // A number is shown as typed while its field has the focus: "1." is on the way to "1.5".
  const [typed, setTyped] = useState<string | null>(null);
  const change = (text: string) => {
    if (isNumber) setTyped(text);
    onChange(isNumber ? readNumber(text) : text === '' && !field.isRequired ? leftOut(field) : text);
  };
  return (
    <TextField
      label={field.label}
      required={field.isRequired}
      fullWidth
      disabled={isReadOnly}
      value={typed ?? textOf(value)}
      onChange={(event) => change(event.target.value)}
      onBlur={() => setTyped(null)}
      error={fault !== undefined}
      helperText={fault ?? field.help}
      placeholder={field.isRequired ? undefined : textOf(field.schema.default)}
      slotProps={{
        htmlInput: { inputMode: isNumber ? 'decimal' : undefined, autoComplete: 'off', spellCheck: false },
      }}
    />
  );
}

/** An emptied text stays empty where that means something else than leaving it out. */
function leftOut({ schema }: SchemaField): '' | undefined {
  return schema.default === undefined ? undefined : '';
}

export function ChoiceField({ field, path, value, onChange }: FieldProps<FieldOf<'choice'>>) {
  const { isReadOnly, faultAt } = useFormContext();
  const fault = faultAt(path);
  const at = field.options.findIndex((option) => option === value);
  const canLeaveOut = !field.isRequired && field.schema.default === undefined;
  return (
    <TextField
      select
      label={field.label}
      required={field.isRequired}
      fullWidth
      disabled={isReadOnly}
      value={at < 0 ? '' : String(at)}
      onChange={({ target }) =>
        onChange(target.value === '' ? undefined : field.options[Number(target.value)])
      }
      error={fault !== undefined}
      helperText={fault ?? field.help}
      slotProps={{ select: { native: true }, inputLabel: { shrink: true } }}
    >
      {(canLeaveOut || at < 0) && <option value="">{canLeaveOut ? 'left out' : 'choose'}</option>}
      {field.options.map((option, index) => (
        <option key={String(option)} value={String(index)}>
          {option === true ? 'yes' : option === false ? 'no' : String(option)}
        </option>
      ))}
    </TextField>
  );
}

export function SwitchField({ field, path, value, onChange }: FieldProps<FieldOf<'switch'>>) {
  const { isReadOnly, faultAt } = useFormContext();
  const fault = faultAt(path);
  const helpId = useId();
  return (
    <Box>
      <FormControlLabel
        label={field.label}
        control={
          <Switch
            checked={value === true}
            disabled={isReadOnly}
            onChange={(_event, isOn) => onChange(isOn)}
            slotProps={{ input: { 'aria-describedby': helpId } }}
          />
        }
      />
      <FormHelperText id={helpId} error={fault !== undefined}>
        {fault ?? field.help}
      </FormHelperText>
    </Box>
  );
}

/** What no field can be drawn for is typed as JSON. */
export function JsonField({ field, path, value, onChange }: FieldProps<FieldOf<'json'>>) {
  const { isReadOnly, faultAt } = useFormContext();
  const [text, setText] = useState(() => (value === undefined ? '' : JSON.stringify(value)));
  const [isTorn, setTorn] = useState(false);
  const fault = isTorn ? 'This is no JSON yet.' : faultAt(path);
  const change = (next: string) => {
    setText(next);
    try {
      onChange(next.trim() === '' ? undefined : JSON.parse(next));
      setTorn(false);
    } catch {
      setTorn(true);
    }
  };
  return (
    <TextField
      label={`${field.label} (JSON)`}
      required={field.isRequired}
      fullWidth
      multiline
      disabled={isReadOnly}
      value={text}
      onChange={(event) => change(event.target.value)}
      error={fault !== undefined}
      helperText={fault ?? field.help}
    />
  );
}
