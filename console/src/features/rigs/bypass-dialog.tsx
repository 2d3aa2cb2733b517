import { useState, type SubmitEvent } from 'react';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import TextField from '@mui/material/TextField';
import type { Interlock } from '@cresthold/shared';
import { asProblem } from '../../api/index.js';
import { plainNumber, ProblemNotice } from '../../components/index.js';
import { durationText } from '../envelopes/index.js';
import { useBypass } from './api/interlock-commands.js';

interface BypassDialogProps {
  rigId: string;
  interlock: Interlock;
  /** Longest bypass that the envelope allows, s. */
  atMostS: number;
  onClose: () => void;
}

/** Asks for how long and why an interlock is not to act. */
export function BypassDialog({ rigId, interlock, atMostS, onClose }: BypassDialogProps) {
  const bypass = useBypass(rigId);
  const [minutes, setMinutes] = useState(plainNumber(Math.min(atMostS, 600) / 60));
  const [reason, setReason] = useState('');
  const [isTried, setTried] = useState(false);
  const forS = 60 * Number(minutes.trim().replace(',', '.') || NaN);
  const timeFault =
    forS > 0 && forS <= atMostS
      ? null
      : `Give a time above 0 and at most ${plainNumber(atMostS / 60)} minutes.`;
  const reasonFault = reason.trim() === '' ? 'Give a reason: it goes into the record.' : null;
  const problem = bypass.error ? asProblem(bypass.error) : null;
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (timeFault !== null || reasonFault !== null) return;
    bypass.mutate({ interlock: interlock.id, forS, reason: reason.trim() }, { onSuccess: onClose });
  };
  const shownTimeFault = (isTried ? timeFault : null) ?? problem?.fieldMessage('forS');
  const shownReasonFault = (isTried ? reasonFault : null) ?? problem?.fieldMessage('reason');
  return (
    <Dialog open onClose={onClose} aria-labelledby="bypass-title" maxWidth="sm" fullWidth>
      <form onSubmit={submit} noValidate>
        <DialogTitle id="bypass-title" variant="h3">
          Bypass {interlock.title}
        </DialogTitle>
        <DialogContent sx={{ display: 'grid', gap: 2 }}>
          <div>
            It is judged and shown, but does not {interlock.action}. At the end it acts at once where it still
            must. The envelope allows at most {durationText(atMostS)}.
          </div>
          <TextField
            label="For, minutes"
            value={minutes}
            onChange={(event) => setMinutes(event.target.value)}
            error={Boolean(shownTimeFault)}
            helperText={shownTimeFault}
            slotProps={{ htmlInput: { inputMode: 'decimal', autoComplete: 'off' } }}
          />
          <TextField
            label="Reason"
            value={reason}
            onChange={(event) => setReason(event.target.value)}
            autoFocus
            multiline
            minRows={2}
            error={Boolean(shownReasonFault)}
            helperText={shownReasonFault}
          />
          {bypass.error !== null && <ProblemNotice title="Not bypassed" error={bypass.error} />}
        </DialogContent>
        <DialogActions>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" variant="contained" disabled={bypass.isPending}>
            Bypass
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
