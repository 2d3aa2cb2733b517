import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { TripSummary } from '../../api/index.js';
import { formatInstant, formatMoment, Loading, Panel, ProblemNotice } from '../../components/index.js';
import { useTrip, useTrips } from './api/trips.js';
import { restText, StopTrajectoryChart } from './stop-trajectory-chart.js';

/** The last trips: what came first, who reset, and how the rig came to rest. */
export function TripHistory({ rigId, latchedAt }: { rigId: string; latchedAt: string | null }) {
  const trips = useTrips(rigId, latchedAt);
  return (
    <Panel title="Trips">
      {trips.isPending && <Loading what="trips" />}
      {trips.error !== null && (
        <ProblemNotice
          title="The trips could not be loaded"
          error={trips.error}
          onRetry={() => void trips.refetch()}
        />
      )}
      {trips.data?.length === 0 && <Box sx={{ color: 'text.secondary' }}>No trip of this rig yet.</Box>}
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1.5 }}>
        {trips.data?.map((trip) => (
          <TripEntry key={trip.id} summary={trip} />
        ))}
      </Box>
    </Panel>
  );
}

function TripEntry({ summary }: { summary: TripSummary }) {
  const [isOpen, setOpen] = useState(false);
  const { trip, resetBy, resetAt, resetReason, timesToRest } = summary;
  const small = { fontSize: '0.75rem', color: 'text.secondary' };
  return (
    <Box component="li">
      <Box sx={{ fontWeight: 700 }}>{trip.message}</Box>
      <Box sx={small}>
        {formatMoment(trip.at)} · {trip.cause}
        {trip.by !== null && ` · pressed by ${trip.by}`}
        {trip.later.length > 0 && ` · ${trip.later.length} followed`}
      </Box>
      <Box sx={small}>
        {resetAt === null ? 'Not reset.' : `Reset by ${resetBy} at ${formatInstant(resetAt)}: ${resetReason}`}
      </Box>
      {timesToRest === null ? (
        <Box sx={small}>How it came to rest was not recorded.</Box>
      ) : (
        <Box sx={small}>
          {timesToRest.map(restText).join('; ')}{' '}
          <Button size="small" aria-expanded={isOpen} onClick={() => setOpen(!isOpen)}>
            {isOpen ? 'Hide the stop' : 'Show the stop'}
          </Button>
        </Box>
      )}
      {isOpen && <TripTrajectory summary={summary} />}
    </Box>
  );
}

/** The stop of a trip as a chart; nothing while it is not known. */
export function TripTrajectory({ summary }: { summary: TripSummary | undefined }) {
  const trip = useTrip(summary);
  if (!trip.data) return null;
  if (trip.data.trajectory === null) return <Box sx={{ fontSize: '0.75rem' }}>No longer kept.</Box>;
  return <StopTrajectoryChart trajectory={trip.data.trajectory} />;
}
