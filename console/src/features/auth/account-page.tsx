import { useQuery } from '@tanstack/react-query';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { Loading, Page, Panel, ProblemNotice } from '../../components/index.js';
import { ownSessionsQuery, useEndOwnSessions, useSecondFactor } from './api/account.js';
import { PasswordPanel } from './password-panel.js';
import { roleTitles } from './permissions.js';
import { SecondFactorPanel } from './second-factor-panel.js';
import { useSession } from './session-context.js';
import { SessionList } from './session-list.js';

/** One's own account: rights, password, second factor, sessions. */
export function AccountPage() {
  const factor = useSecondFactor();
  return (
    <Page title="Your account">
      <Rights />
      {factor.isPending && <Loading what="account" />}
      {factor.error !== null && (
        <ProblemNotice title="The account could not be loaded" error={factor.error} />
      )}
      {factor.data && (
        <>
          <PasswordPanel hasSecondFactor={factor.data.isSetUp} />
          <SecondFactorPanel factor={factor.data} />
        </>
      )}
      <Sessions />
    </Page>
  );
}

function Rights() {
  const { account, title, roles, rigLimits } = useSession();
  const rigsOf = (role: (typeof roles)[number]) =>
    rigLimits.find((limit) => limit.role === role)?.rigs.join(', ') ?? 'every rig';
  return (
    <Panel title={title}>
      <Box>
        Signs in as <strong>{account}</strong>.
      </Box>
      <Box component="ul" sx={{ my: 0.5, pl: 2.5 }}>
        {roles.map((role) => (
          <li key={role}>
            {roleTitles[role]} on {rigsOf(role)}
          </li>
        ))}
      </Box>
      <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
        An emergency stop is taken from you on every rig.
      </Box>
    </Panel>
  );
}

function Sessions() {
  const sessions = useQuery(ownSessionsQuery());
  const end = useEndOwnSessions();
  const others = (sessions.data ?? []).filter((session) => !session.isThis);
  return (
    <Panel
      title="Where you are signed in"
      isFlush
      actions={
        others.length > 0 && (
          <Button disabled={end.isPending} onClick={() => end.mutate(null)}>
            End all others
          </Button>
        )
      }
    >
      {sessions.isPending && (
        <Box sx={{ p: 1.5 }}>
          <Loading what="sessions" />
        </Box>
      )}
      {sessions.error !== null && (
        <ProblemNotice title="The sessions could not be loaded" error={sessions.error} />
      )}
      <SessionList
        sessions={sessions.data ?? []}
        isBusy={end.isPending}
        onEnd={(sessionId) => end.mutate(sessionId)}
      />
      {end.error !== null && <ProblemNotice title="The session was not ended" error={end.error} />}
    </Panel>
  );
}
