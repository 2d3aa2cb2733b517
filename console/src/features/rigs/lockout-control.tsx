import { useState } from 'react';
import { GatedButton, ReasonDialog } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useLockout } from './api/rig-commands.js';

/** A person's hold on a rig: while it is on, nobody can arm. */
export function LockoutControl({ rigId, isLockedOut }: { rigId: string; isLockedOut: boolean }) {
  const [isAsking, setAsking] = useState(false);
  const obstacle = useObstacle('rig.lock-out');
  const lockout = useLockout(rigId);
  const verb = isLockedOut ? 'Lift lockout' : 'Lock out';
  return (
    <>
      <GatedButton obstacle={obstacle} onClick={() => setAsking(true)}>
        {verb} …
      </GatedButton>
      {isAsking && (
        <ReasonDialog
          title={isLockedOut ? 'Lift the lockout' : 'Lock the rig out'}
          confirmLabel={verb}
          error={lockout.error}
          isBusy={lockout.isPending}
          onClose={() => setAsking(false)}
          onConfirm={(reason) =>
            lockout.mutate({ isLockedOut: !isLockedOut, reason }, { onSuccess: () => setAsking(false) })
          }
        >
          {isLockedOut
            ? 'The rig can be armed again afterwards.'
            : 'Nobody can arm the rig until the lockout is lifted. It replaces no padlock on the supply.'}
        </ReasonDialog>
      )}
    </>
  );
}
