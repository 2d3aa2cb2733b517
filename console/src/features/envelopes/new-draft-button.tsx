import { useNavigate } from 'react-router-dom';
import type { Rig } from '@cresthold/shared';
import type { EnvelopeDocument } from '../../api/index.js';
import { GatedButton, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useCreateDraft } from './api/envelope-changes.js';
import { firstEnvelope } from './first-envelope.js';

/** Begins a draft from what is in force, or from the rig's display ranges where nothing is. */
export function NewDraftButton({ rig, envelopes }: { rig: Rig; envelopes: readonly EnvelopeDocument[] }) {
  const obstacle = useObstacle('envelope.draft');
  const create = useCreateDraft(rig.id);
  const navigate = useNavigate();
  const begin = () => {
    const inForce = envelopes.find(({ status }) => status === 'in-force');
    create.mutate(inForce?.content ?? firstEnvelope(rig), {
      onSuccess: (draft) => void navigate(`?version=${draft.version}`),
    });
  };
  return (
    <>
      <GatedButton obstacle={obstacle} isBusy={create.isPending} onClick={begin}>
        New draft
      </GatedButton>
      {create.error !== null && <ProblemNotice title="No draft was begun" error={create.error} />}
    </>
  );
}
