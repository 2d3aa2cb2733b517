import { useState } from 'react';
import type { EnvelopeDocument } from '../../api/index.js';
import { GatedButton, Notice, ReasonDialog } from '../../components/index.js';
import { useObstacle, useSession } from '../auth/index.js';
import { useApprove, useReturn } from './api/envelope-changes.js';

/** Approving or returning what was submitted; never by its author. */
export function EnvelopeDecision({ envelope }: { envelope: EnvelopeDocument }) {
  const [asked, setAsked] = useState<'approve' | 'return' | null>(null);
  const roleObstacle = useObstacle('envelope.decide');
  const { account } = useSession();
  const approve = useApprove(envelope.rigId);
  const giveBack = useReturn(envelope.rigId);
  const obstacle =
    roleObstacle ??
    (envelope.author === account ? 'You wrote this version: somebody else must decide.' : null);
  const decision = asked === 'return' ? giveBack : approve;
  const close = () => setAsked(null);
  return (
    <Notice
      kind="act"
      title={`Version ${envelope.version} waits for approval by a safety officer who is not its author`}
      actions={
        <>
          <GatedButton variant="contained" obstacle={obstacle} onClick={() => setAsked('approve')}>
            Approve …
          </GatedButton>
          <GatedButton obstacle={obstacle} onClick={() => setAsked('return')}>
            Return …
          </GatedButton>
        </>
      }
    >
      Submitted by {envelope.submittedBy ?? envelope.author}.
      {asked !== null && (
        <ReasonDialog
          title={
            asked === 'approve' ? `Approve version ${envelope.version}` : `Return version ${envelope.version}`
          }
          confirmLabel={asked === 'approve' ? 'Approve' : 'Return'}
          error={decision.error}
          isBusy={decision.isPending}
          onClose={close}
          onConfirm={(reason) =>
            decision.mutate({ id: envelope.id, revision: envelope.revision, reason }, { onSuccess: close })
          }
        >
          {asked === 'approve'
            ? 'It comes in force at once and supersedes the version before. The rig must be idle.'
            : 'Its author can change it and submit it again.'}
        </ReasonDialog>
      )}
    </Notice>
  );
}
