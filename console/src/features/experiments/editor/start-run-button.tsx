import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import Box from '@mui/material/Box';
import type { PreflightFault, RigStatus } from '@cresthold/shared';
import { GatedButton, ProblemNotice } from '../../../components/index.js';
import { useObstacle } from '../../auth/index.js';
import { useStartRun } from '../api/experiment-changes.js';

interface StartRunButtonProps {
  experimentId: string;
  version: number;
  status: RigStatus | null;
  faults: readonly PreflightFault[] | undefined;
  isChanged: boolean;
}

/** Starts the saved version on its rig and goes to the run. */
export function StartRunButton({ experimentId, version, status, faults, isChanged }: StartRunButtonProps) {
  const roleObstacle = useObstacle('run.start');
  const start = useStartRun();
  const navigate = useNavigate();
  const [key, setKey] = useState(() => crypto.randomUUID());
  const press = () =>
    start.mutate(
      { experimentId, version, key },
      {
        onSuccess: (run) => void navigate(`/runs/${run.id}`),
        onError: () => setKey(crypto.randomUUID()),
      },
    );
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <GatedButton
        variant="contained"
        obstacle={roleObstacle ?? startObstacle(status, faults, isChanged)}
        isBusy={start.isPending}
        onClick={press}
      >
        Start version {version}
      </GatedButton>
      {start.error !== null && <ProblemNotice title="Not started" error={start.error} />}
    </Box>
  );
}

/** Why a run cannot be started now, in words; null where it can. */
export function startObstacle(
  status: RigStatus | null,
  faults: readonly PreflightFault[] | undefined,
  isChanged: boolean,
): string | null {
  if (isChanged) return 'Save the changes as a version first.';
  if (faults?.some((fault) => fault.severity === 'error')) return 'Mend the errors that preflight found.';
  if (status === null) return 'The state of the rig is not known yet.';
  switch (status.phase) {
    case 'armed':
      return null;
    case 'idle':
      return 'The rig is not armed: arm it on its page.';
    case 'offline':
      return 'The rig is offline.';
    case 'tripped':
      return 'The rig is tripped: have it reset.';
    case 'running':
    case 'stopping':
      return 'The rig is busy with a run.';
  }
}
