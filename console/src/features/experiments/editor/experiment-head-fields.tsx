import Box from '@mui/material/Box';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import { titleSchema, type ExperimentContent } from '@cresthold/shared';
import type { ObjectiveDocument } from '../../../api/index.js';
import { useTextDraft } from '../inspector/use-text-draft.js';

interface ExperimentHeadFieldsProps {
  rigId: string;
  content: ExperimentContent;
  objectives: readonly ObjectiveDocument[];
  isReadOnly: boolean;
  onChange: (content: ExperimentContent) => void;
}

const none = '';

/** Title and objective of the experiment. */
export function ExperimentHeadFields(props: ExperimentHeadFieldsProps) {
  const { content, objectives, isReadOnly, onChange } = props;
  const title = useTextDraft(content.title, (text) => {
    const outcome = titleSchema.safeParse(text);
    if (!outcome.success) return outcome.error.issues[0]?.message ?? 'This title cannot be taken.';
    onChange({ ...content, title: outcome.data });
    return null;
  });
  return (
    <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 2 }}>
      <TextField
        label="Title"
        value={title.text}
        onChange={(event) => title.setText(event.target.value)}
        onBlur={title.commit}
        error={title.fault !== null}
        helperText={title.fault}
        disabled={isReadOnly}
        sx={{ flex: '2 1 18rem' }}
      />
      <TextField
        select
        label="Objective"
        value={content.objectiveId ?? none}
        onChange={({ target }) =>
          onChange({ ...content, objectiveId: target.value === none ? null : target.value })
        }
        disabled={isReadOnly}
        helperText={
          objectives.length === 0
            ? 'This rig has no objective yet: write one on the page Objectives.'
            : undefined
        }
        sx={{ flex: '1 1 16rem' }}
      >
        <MenuItem value={none}>none</MenuItem>
        {objectives.map((objective) => (
          <MenuItem key={objective.id} value={objective.id}>
            {objective.content.title} ({objective.content.direction})
          </MenuItem>
        ))}
      </TextField>
    </Box>
  );
}
