import FormControlLabel from '@mui/material/FormControlLabel';
import Radio from '@mui/material/Radio';
import RadioGroup from '@mui/material/RadioGroup';
import type { ProofTest } from '../../../api/index.js';

interface MethodChoiceProps {
  method: ProofTest['method'];
  condition: string;
  onChange: (method: ProofTest['method']) => void;
}

/** How the condition comes to be true. */
export function MethodChoice({ method, condition, onChange }: MethodChoiceProps) {
  return (
    <RadioGroup
      aria-label="Method"
      value={method}
      onChange={(_, value) => onChange(value === 'made-real' ? 'made-real' : 'forced')}
    >
      <FormControlLabel
        value="forced"
        control={<Radio size="small" />}
        label="Forced: the judge takes the condition as true. Tests everything behind the sensor."
      />
      <FormControlLabel
        value="made-real"
        control={<Radio size="small" />}
        label={`Made real: you bring about ${condition} at the rig. Tests the sensor too.`}
      />
    </RadioGroup>
  );
}
