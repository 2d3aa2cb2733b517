import { useState, type SubmitEvent } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import { Notice, ProblemNotice } from '../../components/index.js';
import { useBeginSecondFactor, useConfirmSecondFactor } from './api/account.js';
import { CodeField } from './code-field.js';

const formStyle = { display: 'grid', gap: 16, maxWidth: 480 };

/** Password, then the secret, then a first code, then the recovery codes. */
export function SecondFactorSetUp({ onDone }: { onDone: () => void }) {
  const begin = useBeginSecondFactor();
  const confirm = useConfirmSecondFactor();
  if (confirm.data) return <RecoveryCodes codes={confirm.data.recoveryCodes} onDone={onDone} />;
  if (begin.data) return <Secret {...begin.data} confirm={confirm} />;
  return <Begin begin={begin} />;
}

function Begin({ begin }: { begin: ReturnType<typeof useBeginSecondFactor> }) {
  const [password, setPassword] = useState('');
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    begin.mutate(password);
  };
  return (
    <form onSubmit={submit} noValidate style={formStyle}>
      <TextField
        label="Password"
        type="password"
        autoComplete="current-password"
        autoFocus
        value={password}
        onChange={(event) => setPassword(event.target.value)}
      />
      {begin.error !== null && <ProblemNotice title="Not begun" error={begin.error} />}
      <Button
        type="submit"
        variant="contained"
        disabled={password === '' || begin.isPending}
        sx={{ justifySelf: 'start' }}
      >
        Show the secret
      </Button>
    </form>
  );
}

interface SecretProps {
  secret: string;
  uri: string;
  confirm: ReturnType<typeof useConfirmSecondFactor>;
}

function Secret({ secret, uri, confirm }: SecretProps) {
  const [code, setCode] = useState('');
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    confirm.mutate(code.trim());
  };
  return (
    <form onSubmit={submit} noValidate style={formStyle}>
      <div>Type this secret into your authenticator (time-based, six digits). It is shown this once.</div>
      <Box component="code" sx={{ fontSize: '1rem', overflowWrap: 'anywhere' }}>
        {secret}
      </Box>
      <Box sx={{ fontSize: '0.8125rem', overflowWrap: 'anywhere' }}>
        On the device that has the authenticator: <a href={uri}>{uri}</a>
      </Box>
      <CodeField value={code} onChange={setCode} />
      {confirm.error !== null && <ProblemNotice title="Not set up yet" error={confirm.error} />}
      <Button
        type="submit"
        variant="contained"
        disabled={code === '' || confirm.isPending}
        sx={{ justifySelf: 'start' }}
      >
        Set up
      </Button>
    </form>
  );
}

function RecoveryCodes({ codes, onDone }: { codes: readonly string[]; onDone: () => void }) {
  return (
    <Box sx={{ display: 'grid', gap: 1.5 }}>
      <Notice kind="act" title="Put these recovery codes away, on paper">
        Each is good once in place of a code. They are shown this once.
      </Notice>
      <Box component="ul" sx={{ m: 0, pl: 2.5, fontFamily: 'monospace', fontSize: '0.8125rem' }}>
        {codes.map((code) => (
          <li key={code}>{code}</li>
        ))}
      </Box>
      <Button variant="contained" onClick={onDone} sx={{ justifySelf: 'start' }}>
        I have put them away
      </Button>
    </Box>
  );
}
