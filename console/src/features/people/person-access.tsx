import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import type { User } from '../../api/index.js';
import { Loading, Notice, ProblemNotice, ReasonDialog } from '../../components/index.js';
import { PasswordHint, SessionList } from '../auth/index.js';
import { useEndUserSessions, useResetSecondFactor, useUserSessions } from './api/user-access.js';

/** How one person gets in: sessions, and the reset of a lost second factor. */
export function PersonAccess({ user }: { user: User }) {
  const sessions = useUserSessions(user.account);
  const end = useEndUserSessions(user.account);
  const [isResetting, setResetting] = useState(false);
  const reset = useResetSecondFactor(user.account);
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <Box sx={{ border: 1, borderColor: 'divider' }}>
        {sessions.isPending && <Loading what="sessions" />}
        {sessions.error !== null && (
          <ProblemNotice title="The sessions could not be loaded" error={sessions.error} />
        )}
        {sessions.data?.length === 0 && <Box sx={{ p: 1.5 }}>Signed in nowhere.</Box>}
        <SessionList sessions={sessions.data ?? []} isBusy={end.isPending} onEnd={(id) => end.mutate(id)} />
      </Box>
      {end.error !== null && <ProblemNotice title="The session was not ended" error={end.error} />}
      {reset.isSuccess && (
        <Notice kind="plain" role="status" title={`The second factor of ${user.title} is taken away`} />
      )}
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
        <Button
          disabled={end.isPending || sessions.data === undefined || sessions.data.length === 0}
          onClick={() => end.mutate(null)}
        >
          End all sessions of {user.title}
        </Button>
        <Button onClick={() => setResetting(true)}>Reset second factor of {user.title} …</Button>
      </Box>
      {isResetting && <ResetDialog user={user} reset={reset} onClose={() => setResetting(false)} />}
    </Box>
  );
}

interface ResetDialogProps {
  user: User;
  reset: ReturnType<typeof useResetSecondFactor>;
  onClose: () => void;
}

function ResetDialog({ user, reset, onClose }: ResetDialogProps) {
  const [password, setPassword] = useState('');
  const confirm = (reason: string) =>
    reset.mutate({ reason, ...(password === '' ? {} : { password }) }, { onSuccess: onClose });
  return (
    <ReasonDialog
      title="Reset second factor"
      confirmLabel="Reset second factor"
      error={reset.error}
      isBusy={reset.isPending}
      onConfirm={confirm}
      onClose={onClose}
    >
      <Box sx={{ display: 'grid', gap: 1.5 }}>
        <div>
          {user.title} signs in with the password alone from then on, and all sessions of the account end.
          Make sure who asks you for it.
        </div>
        <TextField
          label="New password, needed where the present one is short"
          type="password"
          autoComplete="new-password"
          value={password}
          onChange={(event) => setPassword(event.target.value)}
        />
        {password !== '' && <PasswordHint password={password} hasSecondFactor={false} />}
      </Box>
    </ReasonDialog>
  );
}
