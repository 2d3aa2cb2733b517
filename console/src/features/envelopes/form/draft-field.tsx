import { useId } from 'react';
import Box from '@mui/material/Box';
import TextField from '@mui/material/TextField';
import { plainNumber } from '../../../components/index.js';
import { useDraft } from './draft-context.js';
import { textAt, valueAt, type FieldPath } from './draft-values.js';

interface DraftFieldProps {
  path: FieldPath;
  /** Names the field alone, e.g. "Lower limit of Air trim". */
  label: string;
  /** Written in the frame; left out where a table head names the column. */
  isLabelShown?: boolean;
  unit?: string;
  hint?: string;
  options?: readonly { value: string | number | boolean; label: string }[];
  isNumber?: boolean;
}

/** One field of an envelope: typed, chosen or only shown; its fault stands right below it. */
export function DraftField(props: DraftFieldProps) {
  const { path, options } = props;
  const { value, isReadOnly } = useDraft();
  if (isReadOnly) {
    const current = valueAt(value, path);
    const option = options?.find((choice) => choice.value === current)?.label;
    const number = typeof current === 'number' ? plainNumber(current) : undefined;
    return <ShownField {...props} text={option ?? number ?? textAt(value, path)} />;
  }
  return <EnteredField {...props} current={textAt(value, path)} />;
}

function ShownField({ text, unit = '', label, isLabelShown = false }: DraftFieldProps & { text: string }) {
  return (
    <span>
      {isLabelShown && (
        <Box component="span" sx={{ color: 'text.secondary' }}>
          {label}:{' '}
        </Box>
      )}
      {text}
      {unit !== '' && (
        <Box component="span" sx={{ color: 'text.secondary' }}>
          {' '}
          {unit}
        </Box>
      )}
    </span>
  );
}

function EnteredField(props: DraftFieldProps & { current: string }) {
  const { path, label, isLabelShown = false, unit = '', hint, options, isNumber = false, current } = props;
  const { setValue, faultAt } = useDraft();
  const id = useId();
  const fault = faultAt(path);
  const change = (text: string) => {
    setValue(path, options?.find(({ value }) => String(value) === text)?.value ?? text);
  };
  return (
    <TextField
      id={id}
      label={isLabelShown ? label : undefined}
      select={options !== undefined}
      fullWidth
      value={current}
      onChange={(event) => change(event.target.value)}
      error={fault !== undefined}
      helperText={fault ?? hint}
      slotProps={{
        select: { native: true },
        inputLabel: options ? { shrink: true } : undefined,
        htmlInput: {
          'aria-label': isLabelShown ? undefined : label,
          inputMode: isNumber ? 'decimal' : undefined,
          autoComplete: 'off',
          spellCheck: false,
        },
        input:
          unit === ''
            ? undefined
            : {
                endAdornment: (
                  <Box
                    component="span"
                    sx={{ color: 'text.secondary', fontSize: '0.75rem', pl: 0.5, whiteSpace: 'nowrap' }}
                  >
                    {unit}
                  </Box>
                ),
              },
      }}
    >
      {options?.map((option) => (
        <option key={String(option.value)} value={String(option.value)}>
          {option.label}
        </option>
      ))}
    </TextField>
  );
}
