import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import type { EnvelopeContent, Interlock, Rig } from '@cresthold/shared';
import type { ProofTest } from '../../../api/index.js';
import { GatedButton, PhaseMark, ProblemNotice } from '../../../components/index.js';
import { useRigStatus } from '../../../live/index.js';
import { useObstacle } from '../../auth/index.js';
import { useArmForProofTests, useProofTest, useStartProofTest } from '../api/proof-tests.js';
import { causeEffectTable } from '../cause-effect/cause-effect-table.js';
import { MethodChoice } from './method-choice.js';
import { ProofTestResult } from './proof-test-result.js';

interface ProofTestGuideProps {
  rig: Rig;
  envelope: EnvelopeContent;
  interlock: Interlock;
  onClose: () => void;
}

/** The way through one proof test: ready, armed, begun, measured, signed. */
export function ProofTestGuide({ rig, envelope, interlock, onClose }: ProofTestGuideProps) {
  const [method, setMethod] = useState<ProofTest['method']>('forced');
  const status = useRigStatus(rig.id, null);
  const start = useStartProofTest(rig.id);
  const test = useProofTest(rig.id, start.data).data ?? start.data;
  const startObstacle = status?.phase === 'armed' ? null : 'The rig must be armed, without a run.';
  return (
    <Dialog open onClose={onClose} aria-labelledby="proof-test-title" maxWidth="md" fullWidth>
      <DialogTitle id="proof-test-title" variant="h3">
        Proof test of {interlock.title}
      </DialogTitle>
      <DialogContent>
        <Box component="ol" sx={{ m: 0, pl: 3, display: 'grid', gap: 2 }}>
          <li>
            <strong>Make ready.</strong> Nobody is at the rig; the hard-wired emergency stop is at hand. This
            software is no safety function: its test replaces none of that one.
          </li>
          <li>
            <strong>Arm.</strong> <ArmStep rigId={rig.id} status={status} /> Then move the actuators away from
            rest, so that there is something to stop.
          </li>
          <li>
            <strong>Expect</strong> when {interlock.condition}:
            <ExpectedEffects rig={rig} envelope={envelope} interlock={interlock} />
          </li>
          <li>
            <strong>Begin.</strong>
            <MethodChoice method={method} condition={interlock.condition} onChange={setMethod} />
            <GatedButton
              variant="contained"
              obstacle={startObstacle}
              isBusy={start.isPending}
              onClick={() => start.mutate({ interlock: interlock.id, method })}
            >
              {method === 'forced' ? 'Force the condition now' : 'Begin, then make it real'}
            </GatedButton>
            {start.error !== null && <ProblemNotice title="Not begun" error={start.error} />}
          </li>
          <li>
            <strong>Result.</strong>
            {test ? <ProofTestResult test={test} /> : ' Not begun yet.'}
          </li>
        </Box>
      </DialogContent>
      <DialogActions>
        <Button onClick={onClose}>Close</Button>
      </DialogActions>
    </Dialog>
  );
}

function ArmStep({ rigId, status }: { rigId: string; status: ReturnType<typeof useRigStatus> }) {
  const arm = useArmForProofTests(rigId);
  const roleObstacle = useObstacle('rig.arm');
  if (!status) return <>The state of the rig is not known.</>;
  const obstacle = roleObstacle ?? (status.phase === 'idle' ? null : 'Only an idle rig can be armed.');
  return (
    <>
      The rig is{' '}
      <PhaseMark phase={status.phase} isPaused={status.isPaused} isLockedOut={status.isLockedOut} />.{' '}
      {status.phase !== 'armed' && (
        <GatedButton obstacle={obstacle} isBusy={arm.isPending} onClick={() => arm.mutate()}>
          Arm for proof tests
        </GatedButton>
      )}
      {arm.error !== null && <ProblemNotice title="Not armed" error={arm.error} />}
    </>
  );
}

function ExpectedEffects({ rig, envelope, interlock }: Omit<ProofTestGuideProps, 'onClose'>) {
  const { actuators, rows } = causeEffectTable({ ...envelope, interlocks: [interlock] }, rig);
  const row = rows.find(({ kind }) => kind === 'interlock');
  return (
    <Box component="ul" aria-label="Expected effect" sx={{ m: 0, pl: 2 }}>
      {row?.effects.map((effect, index) => (
        <li key={actuators[index]?.id}>
          {actuators[index]?.title}: {effect}
        </li>
      ))}
    </Box>
  );
}
