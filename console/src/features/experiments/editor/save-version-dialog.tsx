import { useState, type SubmitEvent } from 'react';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import TextField from '@mui/material/TextField';
import { asProblem } from '../../../api/index.js';
import { Notice, ProblemNotice } from '../../../components/index.js';

interface SaveVersionDialogProps {
  /** Number that the new version would get. */
  version: number;
  error: unknown;
  isBusy: boolean;
  onSave: (note: string) => void;
  onClose: () => void;
}

/** Saves what is drawn as the next version; versions never change afterwards. */
export function SaveVersionDialog({ version, error, isBusy, onSave, onClose }: SaveVersionDialogProps) {
  const [note, setNote] = useState('');
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    onSave(note.trim());
  };
  const isOvertaken = error !== null && asProblem(error).code === 'request.precondition';
  return (
    <Dialog open onClose={onClose} aria-labelledby="save-version-title" maxWidth="sm" fullWidth>
      <form onSubmit={submit}>
        <DialogTitle id="save-version-title" variant="h3">
          Save as version {version}
        </DialogTitle>
        <DialogContent sx={{ display: 'grid', gap: 2 }}>
          <div>A version does not change any more: every run names the one it ran.</div>
          <TextField
            label="What has changed"
            value={note}
            onChange={(event) => setNote(event.target.value)}
            autoFocus
            multiline
            minRows={2}
            slotProps={{ htmlInput: { maxLength: 500 } }}
          />
          {isOvertaken ? (
            <Notice kind="warn" role="alert" title="Somebody saved a version since you began">
              Your drawing is still here. Look at the newer version in the list of versions, then save again:
              it will be based on that one.
            </Notice>
          ) : (
            error !== null && <ProblemNotice title="Not saved" error={error} />
          )}
        </DialogContent>
        <DialogActions>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" variant="contained" disabled={isBusy}>
            Save version {version}
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
