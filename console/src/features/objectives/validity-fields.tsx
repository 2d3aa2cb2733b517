import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import type { ObjectiveContent } from '@cresthold/shared';

type Validity = ObjectiveContent['validity'];

interface ValidityFieldsProps {
  rows: Validity;
  faultOf: (field: string) => string | undefined;
  onChange: (rows: Validity) => void;
}

/** The conditions without which the objective means nothing. */
export function ValidityFields({ rows, faultOf, onChange }: ValidityFieldsProps) {
  const change = (index: number, part: Partial<Validity[number]>) =>
    onChange(rows.map((row, at) => (at === index ? { ...row, ...part } : row)));
  const fieldOf = (index: number, name: 'condition' | 'message') => ({
    value: rows[index]?.[name] ?? '',
    onChange: (event: { target: { value: string } }) => change(index, { [name]: event.target.value }),
    error: faultOf(`validity[${index}].${name}`) !== undefined,
    helperText: faultOf(`validity[${index}].${name}`),
  });
  return (
    <Box
      component="fieldset"
      sx={{ border: 1, borderColor: 'divider', m: 0, p: 1.5, minWidth: 0, display: 'grid', gap: 1.5 }}
    >
      <Box component="legend" sx={{ px: 0.5, fontSize: '0.8125rem' }}>
        Means something only while
      </Box>
      {rows.map((_, index) => (
        <Box
          key={index}
          sx={{
            display: 'grid',
            gap: 1,
            gridTemplateColumns: { xs: '1fr', sm: '1fr 1fr auto' },
            alignItems: 'start',
          }}
        >
          <TextField
            label={`Condition ${index + 1}`}
            {...fieldOf(index, 'condition')}
            slotProps={{ htmlInput: { spellCheck: false, autoComplete: 'off' } }}
          />
          <TextField label={`Why condition ${index + 1}`} {...fieldOf(index, 'message')} />
          <Button
            sx={{ minHeight: 40 }}
            onClick={() => onChange(rows.filter((__, at) => at !== index))}
            aria-label={`Remove condition ${index + 1}`}
          >
            Remove
          </Button>
        </Box>
      ))}
      <Box>
        <Button onClick={() => onChange([...rows, { condition: '', message: '' }])}>Add condition</Button>
      </Box>
    </Box>
  );
}
