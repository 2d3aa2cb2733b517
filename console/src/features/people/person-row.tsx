import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { User } from '../../api/index.js';
import { ProblemNotice } from '../../components/index.js';
import { roleTitles, useSession } from '../auth/index.js';
import { useChangeUser } from './api/users.js';
import { PersonAccess } from './person-access.js';
import { RightsForm } from './rights-form.js';

/** One account: who, which roles, and whether it may sign in. */
export function PersonRow({ user }: { user: User }) {
  const [open, setOpen] = useState<'roles' | 'access' | null>(null);
  const isSelf = useSession().account === user.account;
  const change = useChangeUser();
  const toggle = (part: 'roles' | 'access') => setOpen(open === part ? null : part);
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
            {user.roles.map((role) => roleWithRigs(user, role)).join('; ')}
            {!user.isEnabled && <strong> · disabled</strong>}
          </Box>
        </Box>
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
          <Button
            onClick={() => toggle('roles')}
            aria-expanded={open === 'roles'}
            aria-label={open === 'roles' ? `Cancel the change of ${user.title}` : `Roles … of ${user.title}`}
          >
            {open === 'roles' ? 'Cancel' : 'Roles …'}
          </Button>
          <Button
            onClick={() => toggle('access')}
            aria-expanded={open === 'access'}
            aria-label={open === 'access' ? `Close the access of ${user.title}` : `Access … of ${user.title}`}
          >
            {open === 'access' ? 'Close' : 'Access …'}
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
      {open === 'roles' && <RightsForm user={user} change={change} onDone={() => setOpen(null)} />}
      {open === 'access' && <PersonAccess user={user} />}
      {change.error !== null && (
        <ProblemNotice title={`${user.title} was not changed`} error={change.error} />
      )}
    </Box>
  );
}

/** E.g. `technician on burner-1, kiln-2`. */
function roleWithRigs({ rigLimits }: User, role: User['roles'][number]): string {
  const limit = rigLimits.find((one) => one.role === role);
  return limit === undefined ? roleTitles[role] : `${roleTitles[role]} on ${limit.rigs.join(', ')}`;
}
