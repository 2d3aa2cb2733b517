import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { Lockout } from '../../api/index.js';
import { formatInstant, Notice, ReasonDialog } from '../../components/index.js';
import { useSession } from '../auth/index.js';
import { useLiftLockout, useLockouts } from './api/lockouts.js';

/** Everybody who holds the rig: name, reason, since when, who may lift, and the way to lift one's own. */
export function LockoutNotice({ rigId, isLockedOut }: { rigId: string; isLockedOut: boolean }) {
  const lockouts = useLockouts(rigId, isLockedOut);
  if (!isLockedOut) return null;
  const count = lockouts.data?.length ?? 0;
  const title = count > 1 ? `Locked out by ${count} people` : 'Locked out';
  return (
    <Notice kind="warn" title={title}>
      <Box
        component="ul"
        aria-label="Lockouts"
        sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1 }}
      >
        {lockouts.data?.map((lockout) => (
          <LockoutEntry key={lockout.id} lockout={lockout} />
        ))}
      </Box>
    </Notice>
  );
}

function LockoutEntry({ lockout }: { lockout: Lockout }) {
  const { account, roles } = useSession();
  const [isAsking, setAsking] = useState(false);
  const lift = useLiftLockout(lockout.rigId);
  const { by, mayLift } = lockout;
  const others = mayLift.length === 0 ? 'a safety officer or an administrator' : mayLift.join(', ');
  const isLifter = roles.includes('safety-officer') || roles.includes('administrator');
  const isNamed = mayLift.length === 0 || mayLift.includes(account);
  return (
    <Box component="li" sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, alignItems: 'center' }}>
      <Box sx={{ flex: '1 1 16rem', minWidth: 0 }}>
        <strong>{by}</strong> since {formatInstant(lockout.at)}: {lockout.reason}
        <Box sx={{ fontSize: '0.75rem' }}>
          Lifted by {by}, or by {others}.
        </Box>
      </Box>
      {(account === by || (isLifter && isNamed)) && (
        <Button onClick={() => setAsking(true)}>Lift lockout of {by} …</Button>
      )}
      {isAsking && (
        <ReasonDialog
          title={`Lift the lockout of ${by}`}
          confirmLabel="Lift lockout"
          error={lift.error}
          isBusy={lift.isPending}
          onClose={() => setAsking(false)}
          onConfirm={(reason) => lift.mutate({ lockoutId: lockout.id, reason })}
        >
          The rig can be armed again once no lockout is left. See first that nobody is at it.
        </ReasonDialog>
      )}
    </Box>
  );
}
