import Box from '@mui/material/Box';
import type { RigStatus } from '@cresthold/shared';
import { GatedButton, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useArm, useDisarm } from './api/rig-commands.js';
import { LockoutControl } from './lockout-control.js';
import { armObstacle, disarmObstacle } from './rig-obstacles.js';

/** Arming, disarming and lockout of a rig. */
export function RigActions({ rigId, status }: { rigId: string; status: RigStatus | null }) {
  const roleObstacle = useObstacle('rig.arm');
  const arm = useArm(rigId);
  const disarm = useDisarm(rigId);
  const isArmed = status?.phase === 'armed';
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1.5, alignItems: 'flex-start' }}>
        {isArmed ? (
          <GatedButton
            obstacle={disarmObstacle(status, roleObstacle)}
            isBusy={disarm.isPending}
            onClick={() => disarm.mutate()}
          >
            Disarm
          </GatedButton>
        ) : (
          <GatedButton
            variant="contained"
            obstacle={armObstacle(status, roleObstacle)}
            isBusy={arm.isPending}
            onClick={() => arm.mutate()}
          >
            Arm
          </GatedButton>
        )}
        <LockoutControl rigId={rigId} />
      </Box>
      {arm.error !== null && <ProblemNotice title="Not armed" error={arm.error} />}
      {disarm.error !== null && <ProblemNotice title="Not disarmed" error={disarm.error} />}
    </Box>
  );
}
