import { useState, type ReactNode, type SubmitEvent } from 'react';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import TextField from '@mui/material/TextField';
import { asProblem } from '../api/index.js';
import { ProblemNotice } from './problem-notice.js';

interface ReasonDialogProps {
  title: string;
  /** What will happen, in words. */
  children: ReactNode;
  confirmLabel: string;
  error: unknown;
  isBusy: boolean;
  onConfirm: (reason: string) => void;
  onClose: () => void;
}

/** Asks for the reason that goes into the record with a decision. */
export function ReasonDialog(props: ReasonDialogProps) {
  const [reason, setReason] = useState('');
  const [isTried, setTried] = useState(false);
  const isMissing = reason.trim() === '';
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (!isMissing) props.onConfirm(reason.trim());
  };
  const fieldFault = props.error ? asProblem(props.error).fieldMessage('reason') : undefined;
  return (
    <Dialog open onClose={props.onClose} aria-labelledby="reason-title" maxWidth="sm" fullWidth>
      <form onSubmit={submit} noValidate>
        <DialogTitle id="reason-title" variant="h3">
          {props.title}
        </DialogTitle>
        <DialogContent sx={{ display: 'grid', gap: 2 }}>
          <div>{props.children}</div>
          <TextField
            label="Reason"
            value={reason}
            onChange={(event) => setReason(event.target.value)}
            autoFocus
            multiline
            minRows={2}
            error={(isTried && isMissing) || fieldFault !== undefined}
            helperText={isTried && isMissing ? 'Give a reason: it goes into the record.' : fieldFault}
          />
          {props.error !== null && props.error !== undefined && (
            <ProblemNotice title={`Not done: ${props.title}`} error={props.error} />
          )}
        </DialogContent>
        <DialogActions>
          <Button onClick={props.onClose}>Cancel</Button>
          <Button type="submit" variant="contained" disabled={props.isBusy}>
            {props.confirmLabel}
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
