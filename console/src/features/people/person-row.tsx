import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { User } from '../../api/index.js';
import { ProblemNotice } from '../../components/index.js';
import { roleTitles, useSession } from '../auth/index.js';
import { useChangeUser } from './api/users.js';
import { RoleChoice } from './role-choice.js';

/** One account: who, which roles, and whether it may sign in. */
export function PersonRow({ user }: { user: User }) {
  const [roles, setRoles] = useState<User['roles'] | null>(null);
  const isSelf = useSession().account === user.account;
  const change = useChangeUser();
  const save = () => {
    if (roles) change.mutate({ account: user.account, body: { roles } }, { onSuccess: () => setRoles(null) });
  };
  return (
    <Box
      component="li"
      sx={{ p: 1.5, '& + &': { borderTop: 1, borderColor: 'divider' }, display: 'grid', gap: 1 }}
    >
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, alignItems: 'center' }}>
        <Box sx={{ flex: '1 1 14rem', minWidth: 0 }}>
          <strong>{user.title}</strong>{' '}
          <Box component="span" sx={{ color: 'text.secondary' }}>
            {user.account}
          </Box>
          <Box sx={{ fontSize: '0.8125rem' }}>
            {user.roles.map((role) => roleTitles[role]).join(', ')}
            {!user.isEnabled && <strong> · disabled</strong>}
          </Box>
        </Box>
        <Box sx={{ display: 'flex', gap: 1, flex: 'none' }}>
          <Button
            onClick={() => setRoles(roles ? null : user.roles)}
            aria-expanded={roles !== null}
            aria-label={roles ? `Cancel the change of ${user.title}` : `Roles … of ${user.title}`}
          >
            {roles ? 'Cancel' : 'Roles …'}
          </Button>
          <Button
            disabled={isSelf || change.isPending}
            title={isSelf ? 'You cannot disable yourself.' : undefined}
            onClick={() => change.mutate({ account: user.account, body: { isEnabled: !user.isEnabled } })}
            aria-label={`${user.isEnabled ? 'Disable' : 'Enable'} ${user.title}`}
          >
            {user.isEnabled ? 'Disable' : 'Enable'}
          </Button>
        </Box>
      </Box>
      {roles && (
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, alignItems: 'end' }}>
          <RoleChoice
            label={`Roles of ${user.title}`}
            roles={roles}
            onChange={setRoles}
            fault={roles.length === 0 ? 'Give at least one role.' : undefined}
          />
          <Button variant="contained" onClick={save} disabled={roles.length === 0 || change.isPending}>
            Save roles
          </Button>
        </Box>
      )}
      {change.error !== null && (
        <ProblemNotice title={`${user.title} was not changed`} error={change.error} />
      )}
    </Box>
  );
}
