import { useState } from 'react';
import TextField from '@mui/material/TextField';
import { GatedButton, ReasonDialog } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useLockOut } from './api/lockouts.js';

/** Sets one's own lockout: while any is on, nobody can arm. */
export function LockoutControl({ rigId }: { rigId: string }) {
  const [isAsking, setAsking] = useState(false);
  const [named, setNamed] = useState('');
  const obstacle = useObstacle('rig.lock-out');
  const lockOut = useLockOut(rigId);
  const mayLift = named.split(/[\s,;]+/).filter((account) => account !== '');
  return (
    <>
      <GatedButton obstacle={obstacle} onClick={() => setAsking(true)}>
        Lock out …
      </GatedButton>
      {isAsking && (
        <ReasonDialog
          title="Lock the rig out"
          confirmLabel="Lock out"
          error={lockOut.error}
          isBusy={lockOut.isPending}
          onClose={() => setAsking(false)}
          onConfirm={(reason) => lockOut.mutate({ reason, mayLift }, { onSuccess: () => setAsking(false) })}
        >
          A rig that moves is stopped in order. Nobody can arm it until every lockout on it is lifted. It
          replaces no padlock on the supply.
          <TextField
            label="Who else may lift it (accounts of safety officers or administrators)"
            helperText="Left empty: you, and every safety officer and administrator."
            value={named}
            onChange={(event) => setNamed(event.target.value)}
            fullWidth
            sx={{ mt: 2 }}
          />
        </ReasonDialog>
      )}
    </>
  );
}
