import Box from '@mui/material/Box';
import Checkbox from '@mui/material/Checkbox';
import FormControl from '@mui/material/FormControl';
import FormControlLabel from '@mui/material/FormControlLabel';
import FormGroup from '@mui/material/FormGroup';
import FormHelperText from '@mui/material/FormHelperText';
import FormLabel from '@mui/material/FormLabel';
import type { Role } from '@cresthold/shared';
import type { User } from '../../api/index.js';
import { roleTitles } from '../auth/index.js';
import { useRigTitles } from './api/rig-titles.js';

export type RigLimits = User['rigLimits'];

interface RigLimitsProps {
  roles: readonly Role[];
  limits: RigLimits;
  onChange: (limits: RigLimits) => void;
}

/** Which rigs each role reaches; an administrator gives rights and is not limited. */
export function RigLimitsChoice({ roles, limits, onChange }: RigLimitsProps) {
  const others = (role: Role) => limits.filter((limit) => limit.role !== role);
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      {roles
        .filter((role) => role !== 'administrator')
        .map((role) => (
          <RigsOfRole
            key={role}
            role={role}
            rigs={limits.find((limit) => limit.role === role)?.rigs ?? null}
            onChange={(rigs) => onChange(rigs === null ? others(role) : [...others(role), { role, rigs }])}
          />
        ))}
    </Box>
  );
}

/** Why the limits cannot be saved, in words; null where they can. */
export function rigLimitsObstacle(limits: RigLimits, roles: readonly Role[]): string | null {
  const empty = limits.find(({ role, rigs }) => roles.includes(role) && rigs.length === 0);
  return empty === undefined ? null : `Choose a rig for ${roleTitles[empty.role]}, or take the role away.`;
}

interface RigsOfRoleProps {
  role: Role;
  /** Null for all. */
  rigs: readonly string[] | null;
  onChange: (rigs: string[] | null) => void;
}

function RigsOfRole({ role, rigs, onChange }: RigsOfRoleProps) {
  const known = useRigTitles();
  const listed = known.data ?? [];
  // A rig that is named but not there keeps its place.
  const gone = (rigs ?? []).filter((id) => !listed.some((rig) => rig.id === id));
  const choices = [...listed, ...gone.map((id) => ({ id, title: id }))];
  return (
    <FormControl component="fieldset" error={rigs?.length === 0}>
      <FormLabel component="legend" sx={{ fontSize: '0.75rem' }}>
        Rigs for {roleTitles[role]}
      </FormLabel>
      <FormGroup row sx={{ columnGap: 1 }}>
        <Choice label="every rig" isOn={rigs === null} onChange={(isOn) => onChange(isOn ? null : [])} />
        {rigs !== null &&
          choices.map(({ id, title }) => (
            <Choice
              key={id}
              label={title}
              isOn={rigs.includes(id)}
              onChange={(isOn) => onChange(isOn ? [...rigs, id] : rigs.filter((other) => other !== id))}
            />
          ))}
      </FormGroup>
      {rigs?.length === 0 && <FormHelperText>Choose at least one rig.</FormHelperText>}
    </FormControl>
  );
}

function Choice({
  label,
  isOn,
  onChange,
}: {
  label: string;
  isOn: boolean;
  onChange: (isOn: boolean) => void;
}) {
  return (
    <FormControlLabel
      label={label}
      slotProps={{ typography: { variant: 'body2' } }}
      control={<Checkbox size="small" checked={isOn} onChange={(event) => onChange(event.target.checked)} />}
    />
  );
}
