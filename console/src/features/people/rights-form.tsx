import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { User } from '../../api/index.js';
import type { useChangeUser } from './api/users.js';
import { RigLimitsChoice, rigLimitsObstacle } from './rig-limits.js';
import { RoleChoice } from './role-choice.js';

interface RightsFormProps {
  user: User;
  change: ReturnType<typeof useChangeUser>;
  onDone: () => void;
}

/** Roles of one person, and the rigs that each reaches. */
export function RightsForm({ user, change, onDone }: RightsFormProps) {
  const [roles, setRoles] = useState(user.roles);
  const [limits, setLimits] = useState(user.rigLimits);
  const isReady = roles.length > 0 && rigLimitsObstacle(limits, roles) === null;
  const save = () => {
    const rigLimits = limits.filter(({ role }) => roles.includes(role) && role !== 'administrator');
    change.mutate({ account: user.account, body: { roles, rigLimits } }, { onSuccess: onDone });
  };
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <RoleChoice
        label={`Roles of ${user.title}`}
        roles={roles}
        onChange={setRoles}
        fault={roles.length === 0 ? 'Give at least one role.' : undefined}
      />
      <RigLimitsChoice roles={roles} limits={limits} onChange={setLimits} />
      <Button
        variant="contained"
        onClick={save}
        disabled={!isReady || change.isPending}
        sx={{ justifySelf: 'start' }}
      >
        Save roles
      </Button>
    </Box>
  );
}
