import { Link as RouterLink, useParams } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import type { RigDocument } from '../../api/index.js';
import { Loading, Page, PhaseMark, ProblemNotice } from '../../components/index.js';
import { useRigSamples, useRigStatus } from '../../live/index.js';
import { CalibrationSummary } from '../calibrations/index.js';
import { ProofTestNotice, useEnvelopeInForce } from '../envelopes/index.js';
import { ActuatorPanel } from './actuator-panel.js';
import { useRig } from './api/rig-queries.js';
import { ArmingObstacles } from './arming-obstacles.js';
import { BypassBanner } from './bypass-banner.js';
import { ConnectionPanel } from './connection-panel.js';
import { FaultPanel } from './fault-panel.js';
import { InterlockPanel } from './interlock-panel.js';
import { LockoutNotice } from './lockout-notice.js';
import { RecentRuns } from './recent-runs.js';
import { RigActions } from './rig-actions.js';
import { RigCharts } from './rig-charts.js';
import { useShowsRig } from './rig-in-view.js';
import { LiveTraces } from './traces/live-traces.js';
import { TripBanner } from './trip-banner.js';
import { TripHistory } from './trip-history.js';

/** One rig: live charts, actuators, interlocks, arming, trips. */
export function RigPage() {
  const { rigId = '' } = useParams();
  useShowsRig(rigId);
  const rig = useRig(rigId);
  if (rig.data) return <RigView rig={rig.data} key={rigId} />;
  return (
    <Page title={rigId}>
      {rig.isPending && <Loading what="rig" />}
      {rig.error !== null && (
        <ProblemNotice
          title="The rig could not be loaded"
          error={rig.error}
          onRetry={() => void rig.refetch()}
        />
      )}
    </Page>
  );
}

function RigView({ rig }: { rig: RigDocument }) {
  const status = useRigStatus(rig.id, rig.status);
  const samples = useRigSamples(rig.id);
  const envelope = useEnvelopeInForce(rig.id);
  const shared = { rig: rig.content, status, envelope: envelope?.content, samples };
  return (
    <Page
      title={rig.content.title}
      lead={rig.content.description}
      aside={
        status && (
          <PhaseMark phase={status.phase} isPaused={status.isPaused} isLockedOut={status.isLockedOut} />
        )
      }
      actions={<RigActions rigId={rig.id} status={status} />}
    >
      {status && <TripBanner status={status} />}
      <LockoutNotice rigId={rig.id} isLockedOut={status?.isLockedOut ?? false} />
      <BypassBanner status={status} envelope={envelope?.content} />
      <ArmingObstacles status={status} />
      <ProofTestNotice rigId={rig.id} inForce={envelope?.content} />
      <RigLinks rigId={rig.id} runId={status?.runId ?? null} envelopeVersion={envelope?.version ?? null} />
      <Box
        sx={{
          display: 'grid',
          gap: 2,
          gridTemplateColumns: { xs: 'minmax(0, 1fr)', md: 'minmax(0, 1fr) minmax(20rem, 26rem)' },
          alignItems: 'start',
        }}
      >
        <Box sx={leftColumn}>
          <LiveTraces rig={rig.content} />
          <RigCharts {...shared} />
        </Box>
        <Box sx={{ display: 'grid', gap: 2, minWidth: 0, gridTemplateColumns: 'minmax(0, 1fr)' }}>
          <ActuatorPanel {...shared} />
          <InterlockPanel {...shared} />
          <ConnectionPanel rig={rig.content} status={status} />
          <CalibrationSummary rig={rig.content} />
          {rig.content.isBench && <FaultPanel rig={rig.content} status={status} />}
          <RecentRuns rigId={rig.id} />
          <TripHistory rigId={rig.id} latchedAt={status?.trip?.at ?? null} />
        </Box>
      </Box>
    </Page>
  );
}

const leftColumn = {
  order: { xs: 2, md: 0 },
  minWidth: 0,
  display: 'grid',
  gap: 2,
  gridTemplateColumns: 'minmax(0, 1fr)',
};

interface RigLinksProps {
  rigId: string;
  runId: string | null;
  envelopeVersion: number | null;
}

function RigLinks({ rigId, runId, envelopeVersion }: RigLinksProps) {
  return (
    <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 3, rowGap: 0.5 }}>
      <Link component={RouterLink} to={`/rigs/${rigId}/envelope`}>
        {envelopeVersion === null
          ? 'Envelope: none in force'
          : `Envelope: version ${envelopeVersion} in force`}
      </Link>
      <Link component={RouterLink} to={`/rigs/${rigId}/wiring`}>
        Wiring and calibration
      </Link>
      {runId !== null && (
        <Link component={RouterLink} to={`/runs/${runId}`}>
          The run that is going on
        </Link>
      )}
      <Link component={RouterLink} to={`/experiments?rigId=${rigId}`}>
        Experiments of this rig
      </Link>
    </Box>
  );
}
