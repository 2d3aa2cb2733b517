import { useState, type SubmitEvent } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import type { SecondFactor } from '../../api/index.js';
import { Notice, Panel, ProblemNotice } from '../../components/index.js';
import { useReloadSecondFactor, useRemoveSecondFactor } from './api/account.js';
import { CodeField } from './code-field.js';
import { SecondFactorSetUp } from './second-factor-set-up.js';

/** Says whether a second factor is there, and leads to setting it up or removing it. */
export function SecondFactorPanel({ factor }: { factor: SecondFactor }) {
  const [isOpen, setOpen] = useState(false);
  const reload = useReloadSecondFactor();
  const close = () => {
    setOpen(false);
    reload();
  };
  const label = factor.isSetUp ? 'Remove …' : 'Set up …';
  return (
    <Panel
      title="Second factor"
      actions={<Button onClick={() => setOpen(!isOpen)}>{isOpen ? 'Cancel' : label}</Button>}
    >
      <Box sx={{ display: 'grid', gap: 1.5 }}>
        {factor.isSetUp ? (
          <div>
            An authenticator is set up; {factor.recoveryCodesLeft} recovery codes are left. With both lost, an
            administrator can reset it.
          </div>
        ) : (
          <div>Codes of an authenticator on your phone, asked for beside your password.</div>
        )}
        {factor.isNeededToApprove && !factor.isSetUp && (
          <Notice kind="act" title="This station asks for it of whoever approves limits or resets trips" />
        )}
        {isOpen && (factor.isSetUp ? <Remove onDone={close} /> : <SecondFactorSetUp onDone={close} />)}
      </Box>
    </Panel>
  );
}

function Remove({ onDone }: { onDone: () => void }) {
  const [password, setPassword] = useState('');
  const [code, setCode] = useState('');
  const remove = useRemoveSecondFactor();
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    remove.mutate({ password, code: code.trim() }, { onSuccess: onDone });
  };
  return (
    <form onSubmit={submit} noValidate style={{ display: 'grid', gap: 16, maxWidth: 420 }}>
      <TextField
        label="Password"
        type="password"
        autoComplete="current-password"
        value={password}
        onChange={(event) => setPassword(event.target.value)}
      />
      <CodeField value={code} onChange={setCode} />
      {remove.error !== null && <ProblemNotice title="Not removed" error={remove.error} />}
      <Button
        type="submit"
        variant="contained"
        disabled={password === '' || code === '' || remove.isPending}
        sx={{ justifySelf: 'start' }}
      >
        Remove second factor
      </Button>
    </form>
  );
}
