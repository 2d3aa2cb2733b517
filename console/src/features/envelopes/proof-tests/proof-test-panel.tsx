import { useState } from 'react';
import Box from '@mui/material/Box';
import type { Interlock, Rig } from '@cresthold/shared';
import type { EnvelopeDocument, ProofTestDue } from '../../../api/index.js';
import { GatedButton, Panel, ProblemNotice } from '../../../components/index.js';
import { useObstacle } from '../../auth/index.js';
import { useProofTestDues } from '../api/proof-tests.js';
import { dueText, forbidsArming, isPressing } from './due-text.js';
import { ProofTestGuide } from './proof-test-guide.js';
import { ProofTestHistory } from './proof-test-history.js';

/** Proof tests of the interlocks in force: how each stands, and the way through a test. */
export function ProofTestPanel({ rig, envelope }: { rig: Rig; envelope: EnvelopeDocument }) {
  const { interlocks } = envelope.content;
  const dues = useProofTestDues(rig.id, envelope.content);
  const obstacle = useObstacle('proof-test.do');
  const [tested, setTested] = useState<Interlock | null>(null);
  return (
    <Panel title="Proof tests">
      <Box sx={{ display: 'grid', gap: 1.5, gridTemplateColumns: 'minmax(0, 1fr)' }}>
        {interlocks.length === 0 && (
          <Box sx={{ color: 'text.secondary' }}>There is no interlock to test.</Box>
        )}
        {dues.error !== null && <ProblemNotice title="The dates could not be loaded" error={dues.error} />}
        <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1 }}>
          {interlocks.map((interlock) => (
            <Box
              component="li"
              key={interlock.id}
              sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, justifyContent: 'space-between' }}
            >
              <Box>
                <strong>{interlock.title}</strong>
                <DueLine
                  due={dues.data?.find((due) => due.interlock === interlock.id)}
                  interlock={interlock}
                />
              </Box>
              <GatedButton obstacle={obstacle} onClick={() => setTested(interlock)}>
                Test {interlock.title} …
              </GatedButton>
            </Box>
          ))}
        </Box>
        <ProofTestHistory rigId={rig.id} />
      </Box>
      {tested && (
        <ProofTestGuide
          key={tested.id}
          rig={rig}
          envelope={envelope.content}
          interlock={tested}
          onClose={() => setTested(null)}
        />
      )}
    </Panel>
  );
}

function DueLine({ due, interlock }: { due: ProofTestDue | undefined; interlock: Interlock }) {
  const isAsked = interlock.proofTestEveryDays !== null;
  const text = due ? dueText(due) : isAsked ? 'not known yet' : 'no test asked for';
  const colour =
    due && forbidsArming(due) ? 'paper.act' : due && isPressing(due) ? 'paper.warn' : 'text.secondary';
  return <Box sx={{ fontSize: '0.75rem', color: colour }}>{text}</Box>;
}
