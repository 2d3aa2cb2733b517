import { useState } from 'react';
import Box from '@mui/material/Box';
import type { RigStatus, Trip } from '@cresthold/shared';
import { formatClock, formatInstant, GatedButton, Notice, ReasonDialog } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useReset } from './api/rig-commands.js';
import { useTrips } from './api/trips.js';
import { TripTrajectory } from './trip-history.js';

/** A latched trip: what came first, what followed, and the way to its reset. */
export function TripBanner({ status }: { status: RigStatus }) {
  const [isAsking, setAsking] = useState(false);
  const obstacle = useObstacle('rig.reset');
  const reset = useReset(status.rigId);
  const trips = useTrips(status.rigId, status.trip?.at ?? null);
  if (!status.trip) return null;
  const latched = trips.data?.find(({ resetAt }) => resetAt === null);
  return (
    <>
      <Notice
        kind="trip"
        role="alert"
        title={`Tripped: ${status.trip.message}`}
        actions={
          <GatedButton obstacle={obstacle} variant="contained" onClick={() => setAsking(true)}>
            Reset trip …
          </GatedButton>
        }
      >
        <TripFacts trip={status.trip} />
        <TripTrajectory summary={latched} />
      </Notice>
      {isAsking && (
        <ReasonDialog
          title="Reset the trip"
          confirmLabel="Reset trip"
          error={reset.error}
          isBusy={reset.isPending}
          onClose={() => setAsking(false)}
          onConfirm={(reason) => reset.mutate(reason, { onSuccess: () => setAsking(false) })}
        >
          The rig goes to idle and nothing moves. Reset only when the cause is found and cleared.
        </ReasonDialog>
      )}
    </>
  );
}

function TripFacts({ trip }: { trip: Trip }) {
  return (
    <>
      First cause <strong>{trip.cause}</strong> at {formatInstant(trip.at)}
      {trip.by !== null && `, pressed by ${trip.by}`}.
      {trip.later.length > 0 && (
        <Box component="ol" aria-label="What followed" sx={{ m: 0, pl: 2.5 }}>
          {trip.later.map((later, index) => (
            <li key={`${later.at}-${index}`}>
              {formatClock(later.at)} then {later.cause}
            </li>
          ))}
        </Box>
      )}
    </>
  );
}
