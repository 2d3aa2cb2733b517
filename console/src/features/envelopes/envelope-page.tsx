import { useCallback, useState } from 'react';
import { Link as RouterLink, useParams, useSearchParams } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import type { EnvelopeContent, Rig } from '@cresthold/shared';
import type { EnvelopeDocument } from '../../api/index.js';
import { Empty, Loading, Page, ProblemNotice } from '../../components/index.js';
import { useSession } from '../auth/index.js';
import { useRig, useShowsRig } from '../rigs/index.js';
import { useEnvelopes } from './api/envelope-queries.js';
import { DifferencePanel } from './difference-panel.js';
import { canBeEdited, chosenEnvelope, stageTexts } from './envelope-choice.js';
import { EnvelopeDecision } from './envelope-decision.js';
import { EnvelopeEditor } from './envelope-editor.js';
import { EnvelopeSheet } from './envelope-sheet.js';
import { EnvelopeVersions } from './envelope-versions.js';
import { asForm, type DraftForm } from './form/draft-context.js';
import { NewDraftButton } from './new-draft-button.js';
import { ProofTestPanel } from './proof-tests/proof-test-panel.js';
import { ReplayPanel } from './replay/replay-panel.js';

/** The approved limits, interlocks and watches of a rig: in force, in draft, in the past. */
export function EnvelopePage() {
  const { rigId = '' } = useParams();
  const [search] = useSearchParams();
  const { account } = useSession();
  useShowsRig(rigId);
  const rig = useRig(rigId);
  const envelopes = useEnvelopes(rigId);
  const asked = search.get('version');
  const shown = chosenEnvelope(envelopes.data ?? [], asked === null ? null : Number(asked), account);
  const error = rig.error ?? envelopes.error;
  return (
    <Page
      title={shown ? `Envelope, version ${shown.version}` : 'Envelope'}
      trail={
        <Link component={RouterLink} to={`/rigs/${rigId}`}>
          {rig.data?.content.title ?? rigId}
        </Link>
      }
      aside={shown && <strong>{stageTexts[shown.status]}</strong>}
      actions={
        rig.data && envelopes.data && <NewDraftButton rig={rig.data.content} envelopes={envelopes.data} />
      }
    >
      {(rig.isPending || envelopes.isPending) && <Loading what="envelope" />}
      {error !== null && <ProblemNotice title="The envelope could not be loaded" error={error} />}
      {envelopes.data?.length === 0 && (
        <Empty title="This rig has no envelope yet: it cannot be armed.">
          Begin a draft, submit it, and have somebody else with the role safety officer approve it.
        </Empty>
      )}
      {rig.data && envelopes.data && shown && (
        <EnvelopeView
          key={`${shown.id}:${shown.status}:${shown.revision}`}
          rig={rig.data.content}
          envelope={shown}
          envelopes={envelopes.data}
        />
      )}
    </Page>
  );
}

interface EnvelopeViewProps {
  rig: Rig;
  envelope: EnvelopeDocument;
  envelopes: readonly EnvelopeDocument[];
}

function EnvelopeView({ rig, envelope, envelopes }: EnvelopeViewProps) {
  const { account } = useSession();
  const [content, setContent] = useState<EnvelopeContent>(envelope.content);
  const onContent = useCallback((sound: EnvelopeContent) => setContent(sound), []);
  const isEdited = canBeEdited(envelope, account);
  const inForce = envelopes.find(({ status }) => status === 'in-force');
  const isDifferent = inForce !== undefined && inForce.id !== envelope.id && envelope.status !== 'superseded';
  return (
    <Box
      sx={{
        display: 'grid',
        gap: 2,
        gridTemplateColumns: 'minmax(0, 1fr)',
        [isEdited ? '@media (min-width: 1800px)' : '@media (min-width: 1200px)']: {
          gridTemplateColumns: 'minmax(0, 1fr) 20rem',
        },
        alignItems: 'start',
      }}
    >
      <Box sx={{ display: 'grid', gap: 2, minWidth: 0, gridTemplateColumns: 'minmax(0, 1fr)' }}>
        {envelope.status === 'submitted' && <EnvelopeDecision envelope={envelope} />}
        {isEdited ? (
          <EnvelopeEditor rig={rig} envelope={envelope} onContent={onContent} />
        ) : (
          <EnvelopeSheet form={readOnlyForm(rig, envelope.content)} />
        )}
        {envelope.status === 'in-force' && <ProofTestPanel rig={rig} envelope={envelope} />}
        <ReplayPanel rig={rig} version={envelope.version} content={content} />
      </Box>
      <Box sx={{ display: 'grid', gap: 2, minWidth: 0 }}>
        <Link
          component={RouterLink}
          to={`/rigs/${rig.id}/envelope/cause-and-effect?version=${envelope.version}`}
        >
          Cause-and-effect table, to print
        </Link>
        {isDifferent && <DifferencePanel rig={rig} inForce={inForce} shown={content} />}
        <EnvelopeVersions envelopes={envelopes} shown={envelope.version} />
      </Box>
    </Box>
  );
}

function readOnlyForm(rig: Rig, content: EnvelopeContent): DraftForm {
  return {
    rig,
    isReadOnly: true,
    value: asForm(content),
    setValue: () => undefined,
    faultAt: () => undefined,
  };
}
