import Checkbox from '@mui/material/Checkbox';
import FormControl from '@mui/material/FormControl';
import FormControlLabel from '@mui/material/FormControlLabel';
import FormGroup from '@mui/material/FormGroup';
import FormHelperText from '@mui/material/FormHelperText';
import FormLabel from '@mui/material/FormLabel';
import { roles as allRoles, type Role } from '@cresthold/shared';
import { roleTitles } from '../auth/index.js';

interface RoleChoiceProps {
  label: string;
  roles: readonly Role[];
  onChange: (roles: Role[]) => void;
  fault?: string | undefined;
}

export function RoleChoice({ label, roles, onChange, fault }: RoleChoiceProps) {
  const toggle = (role: Role, isOn: boolean) =>
    onChange(allRoles.filter((other) => (other === role ? isOn : roles.includes(other))));
  return (
    <FormControl component="fieldset" error={fault !== undefined}>
      <FormLabel component="legend" sx={{ fontSize: '0.75rem' }}>
        {label}
      </FormLabel>
      <FormGroup row sx={{ columnGap: 1 }}>
        {allRoles.map((role) => (
          <FormControlLabel
            key={role}
            label={roleTitles[role]}
            slotProps={{ typography: { variant: 'body2' } }}
            control={
              <Checkbox
                size="small"
                checked={roles.includes(role)}
                onChange={(event) => toggle(role, event.target.checked)}
              />
            }
          />
        ))}
      </FormGroup>
      {fault !== undefined && <FormHelperText>{fault}</FormHelperText>}
    </FormControl>
  );
}
