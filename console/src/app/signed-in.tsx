import { useEffect } from 'react';
import { Navigate, useLocation } from 'react-router-dom';
import Box from '@mui/material/Box';
import { Loading, ProblemNotice } from '../components/index.js';
import {
  ReauthenticationDialog,
  SessionProvider,
  useAttendance,
  useSessionQuery,
} from '../features/auth/index.js';
import { useLiveHub } from '../live/index.js';
import { Shell } from './layout/shell.js';

/** The part of the console behind the door; opens the live link while somebody is signed in. */
export function SignedIn() {
  const session = useSessionQuery();
  const hub = useLiveHub();
  const location = useLocation();
  const isSignedIn = session.data !== null && session.data !== undefined;
  useEffect(() => {
    if (!isSignedIn) return;
    hub.start();
    return () => hub.stop();
  }, [hub, isSignedIn]);
  useAttendance(isSignedIn);
  if (session.isPending)
    return (
      <Box sx={{ p: 3 }}>
        <Loading what="session" />
      </Box>
    );
  if (session.data === null) {
    return <Navigate to="/sign-in" replace state={{ from: location.pathname + location.search }} />;
  }
  if (session.data === undefined) {
    return (
      <Box component="main" sx={{ p: 3 }}>
        <ProblemNotice
          title="The console cannot start"
          error={session.error}
          onRetry={() => void session.refetch()}
        />
      </Box>
    );
  }
  return (
    <SessionProvider session={session.data}>
      <Shell />
      <ReauthenticationDialog />
    </SessionProvider>
  );
}
