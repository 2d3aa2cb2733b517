import { useCallback, useState } from 'react';
import { asProblem } from '../../api/index.js';
import { emergencyStop } from './api/emergency-stop.js';

export type StopOutcome =
  | { state: 'ready' }
  | { state: 'sending' }
  | { state: 'accepted'; at: Date }
  | { state: 'failed'; message: string };

/** The emergency stop of one rig (of all where `rigId` is null): pressing it again always sends again. */
export function useEmergencyStop(rigId: string | null) {
  const [outcome, setOutcome] = useState<StopOutcome>({ state: 'ready' });
  const press = useCallback(() => {
    setOutcome({ state: 'sending' });
    emergencyStop(rigId).then(
      () => setOutcome({ state: 'accepted', at: new Date() }),
      (error: unknown) => setOutcome({ state: 'failed', message: asProblem(error).message }),
    );
  }, [rigId]);
  const dismiss = useCallback(() => setOutcome({ state: 'ready' }), []);
  return { outcome, press, dismiss };
}
