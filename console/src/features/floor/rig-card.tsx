import { Link as RouterLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import Typography from '@mui/material/Typography';
import type { RigStatus } from '@cresthold/shared';
import type { RigDocument } from '../../api/index.js';
import { formatInstant, Notice, PanelBoundary, PhaseMark } from '../../components/index.js';
import { useLinkState, useRigStatus } from '../../live/index.js';
import { useSession } from '../auth/index.js';
import { useEnvelopes, useProofTestDues } from '../envelopes/index.js';
import { BypassBanner, useLockouts } from '../rigs/index.js';
import { BestPoint } from './best-point.js';
import { LiveReadings } from './live-readings.js';
import { needsOf, proofTestNeeds, type Need } from './needs.js';

/** One rig on the floor: how it stands, what it does, what it waits for. */
export function RigCard({ rig }: { rig: RigDocument }) {
  const status = useRigStatus(rig.id, rig.status);
  const session = useSession();
  const envelopes = useEnvelopes(rig.id);
  const inForce = envelopes.data?.find((envelope) => envelope.status === 'in-force')?.content;
  const heartbeat = inForce?.heartbeat?.channel;
  const dues = useProofTestDues(rig.id, inForce).data ?? [];
  const needs = envelopes.data
    ? [...needsOf(rig.id, status, envelopes.data, session), ...proofTestNeeds(rig.id, dues, session)]
    : [];
  return (
    <Box
      component="article"
      aria-label={rig.content.title}
      sx={{
        border: 1,
        borderColor: status?.trip ? 'paper.trip' : 'text.primary',
        bgcolor: 'background.paper',
        display: 'flex',
        flexDirection: 'column',
        minWidth: 0,
      }}
    >
      <PanelBoundary name={rig.content.title}>
        <CardHead rig={rig} status={status} />
        <Lockouts rigId={rig.id} isLockedOut={status?.isLockedOut ?? false} />
        {status?.trip && (
          <Notice kind="trip" title={`Tripped: ${status.trip.message}`}>
            First cause: {status.trip.cause}
          </Notice>
        )}
        <BypassBanner status={status} envelope={inForce} isReadOnly />
        <Box
          sx={{
            flex: 1,
            display: 'grid',
            gridTemplateColumns: { xs: 'minmax(0, 1fr)', sm: 'minmax(0, 2fr) minmax(0, 3fr)' },
          }}
        >
          <Box sx={{ p: 1.5 }}>
            <Facts rig={rig} status={status} />
          </Box>
          <Box
            sx={{
              p: 1.5,
              borderLeft: { sm: 1 },
              borderTop: { xs: 1, sm: 0 },
              borderColor: { xs: 'divider', sm: 'divider' },
            }}
          >
            <LiveReadings rig={rig.content} hiddenChannel={heartbeat} />
          </Box>
        </Box>
        <Needs needs={needs} />
      </PanelBoundary>
    </Box>
  );
}

/** Everybody who holds the rig, with the reason. */
function Lockouts({ rigId, isLockedOut }: { rigId: string; isLockedOut: boolean }) {
  const lockouts = useLockouts(rigId, isLockedOut);
  if (!isLockedOut) return null;
  return (
    <Notice kind="warn" title="Locked out">
      {lockouts.data?.map(({ id, by, reason, at }) => (
        <div key={id}>
          {by} since {formatInstant(at)}: {reason}
        </div>
      ))}
    </Notice>
  );
}

function CardHead({ rig, status }: { rig: RigDocument; status: RigStatus | null }) {
  const isPast = useLinkState() !== 'up';
  return (
    <Box
      sx={{
        p: 1.5,
        borderBottom: 1,
        borderColor: 'divider',
        display: 'flex',
        gap: 1,
        flexWrap: 'wrap',
        alignItems: 'baseline',
      }}
    >
      <Typography variant="h2" sx={{ fontSize: '1rem', letterSpacing: 0, flex: '1 1 10rem' }}>
        <Link component={RouterLink} to={`/rigs/${rig.id}`}>
          {rig.content.title}
        </Link>
      </Typography>
      <Box sx={{ fontStyle: isPast ? 'italic' : undefined }}>
        {status ? (
          <PhaseMark phase={status.phase} isPaused={status.isPaused} isLockedOut={status.isLockedOut} />
        ) : (
          'not known'
        )}
      </Box>
      {rig.content.description !== '' && (
        <Box sx={{ flex: '1 0 100%', fontSize: '0.8125rem', color: 'text.secondary' }}>
          {rig.content.description}
        </Box>
      )}
    </Box>
  );
}

function Facts({ rig, status }: { rig: RigDocument; status: RigStatus | null }) {
  const label = { color: 'text.secondary', fontSize: '0.75rem', fontWeight: 400 };
  return (
    <Box
      component="dl"
      sx={{ m: 0, display: 'grid', gridTemplateColumns: 'minmax(0, 1fr)', gap: 1.25, '& dd': { m: 0 } }}
    >
      <div>
        <Box component="dt" sx={label}>
          Best point of the last run
        </Box>
        <dd>
          <BestPoint rig={rig.content} point={status?.bestPoint ?? {}} />
        </dd>
      </div>
      <div>
        <Box component="dt" sx={label}>
          Running step
        </Box>
        <dd>
          {status?.runId ? (
            <Link component={RouterLink} to={`/runs/${status.runId}`}>
              {status.activeSteps.length > 0 ? status.activeSteps.join(', ') : 'between steps'}
            </Link>
          ) : (
            'no run'
          )}
        </dd>
      </div>
    </Box>
  );
}

function Needs({ needs }: { needs: Need[] }) {
  if (needs.length === 0) return null;
  return (
    <Box sx={{ borderTop: 1, borderColor: 'divider', p: 1.5, bgcolor: 'paper.actWash', color: 'paper.act' }}>
      <Box sx={{ fontSize: '0.75rem' }}>Needs a person</Box>
      <Box component="ul" sx={{ m: 0, pl: 2.5, '& li::marker': { content: '"▸ "' } }}>
        {needs.map((need) => (
          <li key={need.text}>
            <Link component={RouterLink} to={need.to} sx={{ fontWeight: need.isYours ? 700 : 400 }}>
              {need.text}
            </Link>
            {!need.isYours && (
              <Box component="span" sx={{ fontSize: '0.75rem' }}>
                {' '}
                — not in your role
              </Box>
            )}
          </li>
        ))}
      </Box>
    </Box>
  );
}
