import TextField from '@mui/material/TextField';

interface CodeFieldProps {
  value: string;
  onChange: (code: string) => void;
  fault?: string | undefined;
}

/** Takes a code of an authenticator, or a recovery code. */
export function CodeField({ value, onChange, fault }: CodeFieldProps) {
  return (
    <TextField
      label="Code"
      autoComplete="one-time-code"
      autoFocus
      value={value}
      onChange={(event) => onChange(event.target.value)}
      error={fault !== undefined}
      helperText={fault ?? 'Six digits of your authenticator, or one of your recovery codes.'}
      slotProps={{ htmlInput: { autoCapitalize: 'characters', spellCheck: false } }}
    />
  );
}
