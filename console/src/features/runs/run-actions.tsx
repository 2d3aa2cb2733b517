import { useState } from 'react';
import Box from '@mui/material/Box';
import type { RunStatus } from '@cresthold/shared';
import type { RunSummary } from '../../api/index.js';
import { GatedButton, ProblemNotice, ReasonDialog } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { usePauseRun, useResumeRun, useStopRun } from './api/run-changes.js';
import { isEnded } from './api/run-queries.js';

type Asking = 'pause' | 'stop' | null;

/** Pause, resume and the ordered stop of a run that goes on. */
export function RunActions({ run }: { run: RunSummary }) {
  const obstacle = useObstacle('run.steer');
  const [asking, setAsking] = useState<Asking>(null);
  const pause = usePauseRun(run.id);
  const resume = useResumeRun(run.id);
  const stop = useStopRun(run.id);
  if (isEnded(run.status)) return null;
  const asked = asking === 'pause' ? pause : stop;
  const close = () => {
    asked.reset();
    setAsking(null);
  };
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
        {run.status === 'paused' ? (
          <GatedButton
            variant="contained"
            obstacle={obstacle}
            isBusy={resume.isPending}
            onClick={() => resume.mutate()}
          >
            Resume
          </GatedButton>
        ) : (
          <GatedButton obstacle={obstacle ?? notRunning(run.status)} onClick={() => setAsking('pause')}>
            Pause
          </GatedButton>
        )}
        <GatedButton
          obstacle={obstacle ?? (run.status === 'stopping' ? 'The run is stopping.' : null)}
          onClick={() => setAsking('stop')}
        >
          Stop run
        </GatedButton>
      </Box>
      {resume.error !== null && <ProblemNotice title="Not resumed" error={resume.error} />}
      {asking !== null && (
        <ReasonDialog
          title={asking === 'pause' ? 'Pause the run' : 'Stop the run'}
          confirmLabel={asking === 'pause' ? 'Pause' : 'Stop run'}
          error={asked.error}
          isBusy={asked.isPending}
          onConfirm={(reason) => asked.mutate(reason, { onSuccess: close })}
          onClose={close}
        >
          {asking === 'pause'
            ? 'The dither ends and every actuator stays where it is until the run is resumed.'
            : 'The run ends, and every actuator goes to its rest value by its stop action.'}
        </ReasonDialog>
      )}
    </Box>
  );
}

function notRunning(status: RunStatus): string | null {
  return status === 'running' ? null : `The run is ${status}.`;
}
