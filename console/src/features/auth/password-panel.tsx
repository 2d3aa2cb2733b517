import { useState, type SubmitEvent } from 'react';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import { asProblem } from '../../api/index.js';
import { Notice, Panel, ProblemNotice } from '../../components/index.js';
import { useChangePassword } from './api/account.js';
import { CodeField } from './code-field.js';
import { PasswordHint, passwordObstacle } from './password-hint.js';

const empty = { password: '', newPassword: '', code: '' };

/** Changes one's own password. */
export function PasswordPanel({ hasSecondFactor }: { hasSecondFactor: boolean }) {
  const [isOpen, setOpen] = useState(false);
  const [values, setValues] = useState(empty);
  const change = useChangePassword();
  const problem = change.error ? asProblem(change.error) : null;
  const { password, newPassword, code } = values;
  const isReady =
    password !== '' &&
    passwordObstacle(newPassword, hasSecondFactor) === null &&
    (!hasSecondFactor || code !== '');
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    if (!isReady) return;
    const body = { password, newPassword, ...(hasSecondFactor ? { code: code.trim() } : {}) };
    change.mutate(body, {
      onSuccess: () => {
        setValues(empty);
        setOpen(false);
      },
    });
  };
  return (
    <Panel
      title="Password"
      actions={<Button onClick={() => setOpen(!isOpen)}>{isOpen ? 'Cancel' : 'Change password …'}</Button>}
    >
      {!isOpen && !change.isSuccess && 'Changing it ends all your other sessions.'}
      {!isOpen && change.isSuccess && (
        <Notice kind="plain" role="status" title="The password is changed; all your other sessions ended." />
      )}
      {isOpen && (
        <form onSubmit={submit} noValidate style={{ display: 'grid', gap: 16, maxWidth: 420 }}>
          <TextField
            label="Present password"
            type="password"
            autoComplete="current-password"
            autoFocus
            value={password}
            onChange={(event) => setValues({ ...values, password: event.target.value })}
          />
          {hasSecondFactor && (
            <CodeField value={code} onChange={(next) => setValues({ ...values, code: next })} />
          )}
          <TextField
            label="New password"
            type="password"
            autoComplete="new-password"
            value={newPassword}
            onChange={(event) => setValues({ ...values, newPassword: event.target.value })}
            error={problem?.fieldMessage('newPassword') !== undefined}
            helperText={problem?.fieldMessage('newPassword')}
          />
          <PasswordHint password={newPassword} hasSecondFactor={hasSecondFactor} />
          {problem && <ProblemNotice title="The password was not changed" error={problem} />}
          <Button
            type="submit"
            variant="contained"
            disabled={!isReady || change.isPending}
            sx={{ justifySelf: 'start' }}
          >
            Change password
          </Button>
        </form>
      )}
    </Panel>
  );
}
