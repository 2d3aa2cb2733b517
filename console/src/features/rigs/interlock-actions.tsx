import { useState } from 'react';
import Box from '@mui/material/Box';
import type { Interlock, InterlockView } from '@cresthold/shared';
import { GatedButton, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useAcknowledge } from './api/interlock-commands.js';
import { BypassDialog } from './bypass-dialog.js';

interface InterlockActionsProps {
  rigId: string;
  interlock: Interlock;
  view: InterlockView;
}

/** What people can do to one interlock: acknowledge it where it latched, bypass it where the envelope allows that. */
export function InterlockActions({ rigId, interlock, view }: InterlockActionsProps) {
  const [isAsking, setAsking] = useState(false);
  const acknowledge = useAcknowledge(rigId);
  const acknowledgeObstacle = useObstacle('interlock.acknowledge');
  const bypassObstacle = useObstacle('interlock.bypass');
  const { bypassAtMostS } = interlock;
  return (
    <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, '&:not(:empty)': { mt: 0.5 } }}>
      {view.state === 'latched' && (
        <GatedButton
          obstacle={acknowledgeObstacle}
          isBusy={acknowledge.isPending}
          onClick={() => acknowledge.mutate(interlock.id)}
        >
          Acknowledge {interlock.title}
        </GatedButton>
      )}
      {bypassAtMostS !== null && !view.isBypassed && (
        <GatedButton obstacle={bypassObstacle} onClick={() => setAsking(true)}>
          Bypass {interlock.title} …
        </GatedButton>
      )}
      {acknowledge.error !== null && <ProblemNotice title="Not acknowledged" error={acknowledge.error} />}
      {isAsking && bypassAtMostS !== null && (
        <BypassDialog
          rigId={rigId}
          interlock={interlock}
          atMostS={bypassAtMostS}
          onClose={() => setAsking(false)}
        />
      )}
    </Box>
  );
}
