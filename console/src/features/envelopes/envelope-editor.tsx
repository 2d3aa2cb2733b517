import { useEffect } from 'react';
import Box from '@mui/material/Box';
import type { EnvelopeContent, Rig } from '@cresthold/shared';
import { asProblem, type EnvelopeDocument } from '../../api/index.js';
import { GatedButton, Notice, ProblemNotice } from '../../components/index.js';
import { useSaveDraft, useSubmitDraft } from './api/envelope-changes.js';
import { EnvelopeSheet } from './envelope-sheet.js';
import { useDraftForm } from './form/draft-context.js';

interface EnvelopeEditorProps {
  rig: Rig;
  envelope: EnvelopeDocument;
  /** Told of the content whenever it is sound, for the list of differences. */
  onContent: (content: EnvelopeContent) => void;
}

/** A draft in its author's hands: edited, saved, submitted. */
export function EnvelopeEditor({ rig, envelope, onContent }: EnvelopeEditorProps) {
  const save = useSaveDraft(rig.id);
  const submit = useSubmitDraft(rig.id);
  const { form, checked, isTried, tryNow, isChanged } = useDraftForm(
    rig,
    envelope.content,
    save.error ? asProblem(save.error) : null,
  );
  const content = checked.isOk ? checked.content : null;
  useEffect(() => {
    if (content) onContent(content);
  }, [content, onContent]);
  const onSave = () => {
    tryNow();
    if (content) save.mutate({ id: envelope.id, revision: envelope.revision, content });
  };
  return (
    <>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1.5, alignItems: 'flex-start' }}>
        <GatedButton
          variant="contained"
          obstacle={isChanged ? null : 'Everything is saved.'}
          isBusy={save.isPending}
          onClick={onSave}
        >
          Save draft
        </GatedButton>
        <GatedButton
          obstacle={isChanged ? 'Save the draft first.' : null}
          isBusy={submit.isPending}
          onClick={() => submit.mutate(envelope.id)}
        >
          Submit for approval
        </GatedButton>
      </Box>
      {isTried && !checked.isOk && <FaultCount count={checked.faults.size} />}
      {save.error !== null && <ProblemNotice title="The draft was not saved" error={save.error} />}
      {submit.error !== null && <ProblemNotice title="The draft was not submitted" error={submit.error} />}
      <EnvelopeSheet form={form} />
    </>
  );
}

function FaultCount({ count }: { count: number }) {
  return (
    <Notice
      kind="warn"
      role="alert"
      title={`Not saved: ${count === 1 ? 'one field has a fault' : `${count} fields have faults`}`}
    >
      Each is named at its field below.
    </Notice>
  );
}
