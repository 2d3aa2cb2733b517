import { useEffect } from 'react';
import { useBlocker } from 'react-router-dom';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';

/** Asks before a draft that is not saved is left. */
export function LeaveGuard({ isChanged }: { isChanged: boolean }) {
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) =>
      isChanged && currentLocation.pathname !== nextLocation.pathname && !hasLeave(nextLocation.state),
  );
  useEffect(() => {
    if (!isChanged) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [isChanged]);
  if (blocker.state !== 'blocked') return null;
  return (
    <Dialog open onClose={blocker.reset} aria-labelledby="leave-title">
      <DialogTitle id="leave-title" variant="h3">
        Leave without saving?
      </DialogTitle>
      <DialogContent>The draft of this wiring is not saved and would be lost.</DialogContent>
      <DialogActions>
        <Button onClick={blocker.proceed}>Leave, drop the draft</Button>
        <Button variant="contained" onClick={blocker.reset}>
          Stay
        </Button>
      </DialogActions>
    </Dialog>
  );
}

/** State of a move to another page that follows from saving. */
export const afterSaving = { isSaved: true };

function hasLeave(state: unknown): boolean {
  return typeof state === 'object' && state !== null && 'isSaved' in state;
}
