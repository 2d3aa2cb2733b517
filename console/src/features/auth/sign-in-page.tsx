import { useState, type SubmitEvent } from 'react';
import { Navigate, useLocation } from 'react-router-dom';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import { Notice, ProblemNotice } from '../../components/index.js';
import { useSessionQuery } from './api/get-session.js';
import { useSetupQuery } from './api/setup.js';
import { useSignIn } from './api/sign-in.js';
import { GatePage } from './gate-page.js';

interface SignInState {
  /** Where the person wanted to go. */
  from?: string;
  isSetUp?: boolean;
}

export function SignInPage() {
  const location = useLocation();
  const state = (location.state ?? {}) as SignInState;
  const session = useSessionQuery();
  const setup = useSetupQuery();
  if (session.data) return <Navigate to={state.from ?? '/'} replace />;
  if (setup.data?.isNeeded) return <Navigate to="/setup" replace />;
  return (
    <GatePage title="Sign in">
      {state.isSetUp && <Notice kind="plain" role="status" title="The administrator is made. Sign in." />}
      {session.error !== null && <ProblemNotice title="The server cannot be reached" error={session.error} />}
      <SignInForm />
    </GatePage>
  );
}

function SignInForm() {
  const [account, setAccount] = useState('');
  const [password, setPassword] = useState('');
  const [isTried, setTried] = useState(false);
  const signIn = useSignIn();
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (account.trim() !== '' && password !== '') signIn.mutate({ account: account.trim(), password });
  };
  const missing = (value: string, what: string) =>
    isTried && value.trim() === '' ? `Enter your ${what}.` : undefined;
  return (
    <form onSubmit={submit} noValidate style={{ display: 'grid', gap: 16 }}>
      <TextField
        label="Account"
        autoComplete="username"
        autoFocus
        value={account}
        onChange={(event) => setAccount(event.target.value)}
        error={missing(account, 'account') !== undefined}
        helperText={missing(account, 'account')}
        slotProps={{ htmlInput: { autoCapitalize: 'none', spellCheck: false } }}
      />
      <TextField
        label="Password"
        type="password"
        autoComplete="current-password"
        value={password}
        onChange={(event) => setPassword(event.target.value)}
        error={missing(password, 'password') !== undefined}
        helperText={missing(password, 'password')}
      />
      {signIn.error !== null && <ProblemNotice title="Not signed in" error={signIn.error} />}
      <Button type="submit" variant="contained" size="medium" disabled={signIn.isPending}>
        Sign in
      </Button>
    </form>
  );
}
