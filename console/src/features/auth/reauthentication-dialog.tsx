import { useEffect, useState, type SubmitEvent } from 'react';
import { Link } from 'react-router-dom';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import TextField from '@mui/material/TextField';
import { askForPasswordWith, asProblem } from '../../api/index.js';
import { ProblemNotice } from '../../components/index.js';
import { useReauthenticate } from './api/account.js';
import { CodeField } from './code-field.js';

/** Comes up when the server wants the password again, and lets the refused request go on afterwards. */
export function ReauthenticationDialog() {
  const [answer, setAnswer] = useState<((isGiven: boolean) => void) | null>(null);
  useEffect(() => {
    askForPasswordWith(() => new Promise<boolean>((resolve) => setAnswer(() => resolve)));
    return () => askForPasswordWith(null);
  }, []);
  if (answer === null) return null;
  const close = (isGiven: boolean) => {
    setAnswer(null);
    answer(isGiven);
  };
  return <PasswordDialog onDone={() => close(true)} onCancel={() => close(false)} />;
}

function PasswordDialog({ onDone, onCancel }: { onDone: () => void; onCancel: () => void }) {
  const [password, setPassword] = useState('');
  const [code, setCode] = useState('');
  const [asksCode, setAsksCode] = useState(false);
  const give = useReauthenticate();
  const problem = give.error ? asProblem(give.error) : null;
  if (!asksCode && problem?.code === 'auth.code-needed') setAsksCode(true);
  const submit = (event: SubmitEvent) => {
    // It is inside the tree of the form that was refused.
    event.stopPropagation();
    event.preventDefault();
    give.mutate({ password, ...(asksCode ? { code: code.trim() } : {}) }, { onSuccess: onDone });
  };
  return (
    <Dialog open onClose={onCancel} aria-labelledby="again-title" maxWidth="xs" fullWidth>
      <form onSubmit={submit} noValidate>
        <DialogTitle id="again-title" variant="h3">
          Your password, please
        </DialogTitle>
        <DialogContent sx={{ display: 'grid', gap: 2 }}>
          <div>This act goes into the record under your name. Your password counts for five minutes.</div>
          <TextField
            label="Your password"
            type="password"
            autoComplete="current-password"
            autoFocus
            value={password}
            onChange={(event) => setPassword(event.target.value)}
          />
          {asksCode && <CodeField value={code} onChange={setCode} />}
          {problem !== null && problem.code !== 'auth.code-needed' && (
            <ProblemNotice title="Not taken" error={problem} />
          )}
          {problem?.code === 'auth.second-factor-needed' && <Link to="/account">Go to your account</Link>}
        </DialogContent>
        <DialogActions>
          <Button onClick={onCancel}>Cancel</Button>
          <Button type="submit" variant="contained" disabled={password === '' || give.isPending}>
            Go on
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
