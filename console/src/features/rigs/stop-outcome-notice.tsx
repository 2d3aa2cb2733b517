import Button from '@mui/material/Button';
import { formatClock, Notice } from '../../components/index.js';
import type { StopOutcome } from './use-emergency-stop.js';

interface StopOutcomeNoticeProps {
  outcome: StopOutcome;
  /** What was to be stopped, e.g. "Burner 1" or "All rigs". */
  what: string;
  onDismiss: () => void;
}

/** Says at once what became of an emergency stop; a failure stays until it is put away. */
export function StopOutcomeNotice({ outcome, what, onDismiss }: StopOutcomeNoticeProps) {
  const putAway = <Button onClick={onDismiss}>Put away</Button>;
  switch (outcome.state) {
    case 'ready':
      return null;
    case 'sending':
      return <Notice kind="plain" role="status" title={`${what}: emergency stop is being sent …`} />;
    case 'accepted':
      return (
        <Notice
          kind="plain"
          role="status"
          title={`${what}: emergency stop accepted at ${formatClock(outcome.at.toISOString())}.`}
          actions={putAway}
        >
          Check at the rig that it is at rest.
        </Notice>
      );
    case 'failed':
      return (
        <Notice
          kind="trip"
          role="alert"
          title={`NOT STOPPED: ${what}. Use the hard-wired stop now.`}
          actions={putAway}
        >
          {outcome.message}
        </Notice>
      );
  }
}
