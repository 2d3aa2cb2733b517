import { useState, type SubmitEvent } from 'react';
import { Navigate, useLocation } from 'react-router-dom';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import { asProblem } from '../../api/index.js';
import { Notice, ProblemNotice } from '../../components/index.js';
import { useSessionQuery } from './api/get-session.js';
import { useSetupQuery } from './api/setup.js';
import { useSignIn } from './api/sign-in.js';
import { CodeField } from './code-field.js';
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
  const [code, setCode] = useState('');
  const [isTried, setTried] = useState(false);
  const signIn = useSignIn();
  const problem = signIn.error ? asProblem(signIn.error) : null;
  // Once asked for, the code stays on the form through wrong ones.
  const [asksCode, setAsksCode] = useState(false);
  if (!asksCode && problem?.code === 'auth.code-needed') setAsksCode(true);
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (account.trim() === '' || password === '' || (asksCode && code.trim() === '')) return;
    signIn.mutate({ account: account.trim(), password, ...(asksCode ? { code: code.trim() } : {}) });
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
      {asksCode && <CodeField value={code} onChange={setCode} fault={missing(code, 'code')} />}
      {problem !== null && problem.code !== 'auth.code-needed' && (
        <ProblemNotice title="Not signed in" error={problem} />
      )}
      <Button type="submit" variant="contained" size="medium" disabled={signIn.isPending}>
        Sign in
      </Button>
    </form>
  );
}
