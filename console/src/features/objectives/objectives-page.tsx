import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { ObjectiveDocument, RigDocument } from '../../api/index.js';
import { GatedButton, Loading, Page, Panel, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useRigs } from '../rigs/index.js';
import { useObjectives } from './api/objectives.js';
import { ObjectiveForm } from './objective-form.js';

interface Editing {
  rigId: string;
  objective: ObjectiveDocument | null;
}

/** Every objective by rig: what is to be made large or small, and when it means anything. */
export function ObjectivesPage() {
  const rigs = useRigs();
  const objectives = useObjectives();
  const [editing, setEditing] = useState<Editing | null>(null);
  const error = rigs.error ?? objectives.error;
  return (
    <Page title="Objectives">
      {(rigs.isPending || objectives.isPending) && <Loading what="objectives" />}
      {error !== null && <ProblemNotice title="The objectives could not be loaded" error={error} />}
      {objectives.data &&
        rigs.data?.map((rig) => (
          <RigObjectives
            key={rig.id}
            rig={rig}
            objectives={objectives.data.filter(({ rigId }) => rigId === rig.id)}
            editing={editing?.rigId === rig.id ? editing : null}
            onEdit={(objective) => setEditing({ rigId: rig.id, objective })}
            onClose={() => setEditing(null)}
          />
        ))}
    </Page>
  );
}

interface RigObjectivesProps {
  rig: RigDocument;
  objectives: ObjectiveDocument[];
  editing: Editing | null;
  onEdit: (objective: ObjectiveDocument | null) => void;
  onClose: () => void;
}

function RigObjectives({ rig, objectives, editing, onEdit, onClose }: RigObjectivesProps) {
  const obstacle = useObstacle('objective.edit');
  return (
    <Panel
      title={rig.content.title}
      actions={
        <GatedButton obstacle={obstacle} onClick={() => onEdit(null)}>
          New objective
        </GatedButton>
      }
    >
      {objectives.length === 0 && <Box sx={{ color: 'text.secondary' }}>No objective yet.</Box>}
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1.5 }}>
        {objectives.map((objective) => (
          <Box
            component="li"
            key={objective.id}
            sx={{
              display: 'flex',
              flexWrap: 'wrap',
              gap: 1,
              justifyContent: 'space-between',
              alignItems: 'flex-start',
              '& + &': { borderTop: 1, borderColor: 'divider', pt: 1.5 },
            }}
          >
            <ObjectiveFacts objective={objective} />
            {obstacle === null && (
              <Button onClick={() => onEdit(objective)} aria-label={`Change ${objective.content.title}`}>
                Change
              </Button>
            )}
          </Box>
        ))}
      </Box>
      {editing && (
        <Box sx={{ mt: 2 }}>
          <ObjectiveForm
            key={editing.objective?.id ?? 'new'}
            rig={rig.content}
            objective={editing.objective}
            onClose={onClose}
          />
        </Box>
      )}
    </Panel>
  );
}

function ObjectiveFacts({ objective: { content } }: { objective: ObjectiveDocument }) {
  return (
    <Box sx={{ minWidth: 0, flex: '1 1 16rem' }}>
      <strong>{content.title}</strong>
      <div>
        {content.direction}{' '}
        <Box component="code" sx={{ fontFamily: 'inherit' }}>
          {content.expression}
        </Box>
        {content.unit !== '' && (
          <Box component="span" sx={{ color: 'text.secondary' }}>
            {' '}
            in {content.unit}
          </Box>
        )}
      </div>
      {content.validity.map(({ condition, message }) => (
        <Box key={condition} sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
          only while {condition} — {message}
        </Box>
      ))}
    </Box>
  );
}
