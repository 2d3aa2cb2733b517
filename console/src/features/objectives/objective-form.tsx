import { useState, type SubmitEvent } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import type { ObjectiveContent, Rig } from '@cresthold/shared';
import { asProblem, type ObjectiveDocument } from '../../api/index.js';
import { Panel, ProblemNotice } from '../../components/index.js';
import { useSaveObjective } from './api/objectives.js';
import { ChannelList } from './channel-list.js';
import { emptyObjective, objectiveFaults } from './objective-values.js';
import { ValidityFields } from './validity-fields.js';

interface ObjectiveFormProps {
  rig: Rig;
  /** Null where a new one is made. */
  objective: ObjectiveDocument | null;
  onClose: () => void;
}

/** Makes or changes an objective; faults stand at their fields, those of the server too. */
export function ObjectiveForm({ rig, objective, onClose }: ObjectiveFormProps) {
  const [content, setContent] = useState<ObjectiveContent>(objective?.content ?? emptyObjective);
  const [isTried, setTried] = useState(false);
  const save = useSaveObjective();
  const faults = objectiveFaults(content);
  const problem = save.error ? asProblem(save.error) : null;
  const faultOf = (field: string) =>
    (isTried ? faults.get(field) : undefined) ?? problem?.fieldMessage(field);
  const change = (part: Partial<ObjectiveContent>) => setContent({ ...content, ...part });
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (faults.size === 0) save.mutate({ rigId: rig.id, content, from: objective }, { onSuccess: onClose });
  };
  const fieldOf = (name: 'title' | 'expression' | 'unit') => ({
    value: content[name],
    onChange: (event: { target: { value: string } }) => change({ [name]: event.target.value }),
    error: faultOf(name) !== undefined,
    helperText: faultOf(name),
  });
  return (
    <Panel title={objective ? `Change “${objective.content.title}”` : `New objective of ${rig.title}`}>
      <form onSubmit={submit} noValidate>
        <Box sx={{ display: 'grid', gap: 2 }}>
          <TextField label="Title" autoFocus {...fieldOf('title')} />
          <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '12rem 1fr 8rem' } }}>
            <TextField
              select
              label="Make it"
              value={content.direction}
              onChange={(event) => change({ direction: event.target.value as ObjectiveContent['direction'] })}
            >
              <MenuItem value="maximise">large</MenuItem>
              <MenuItem value="minimise">small</MenuItem>
            </TextField>
            <TextField
              label="Expression"
              {...fieldOf('expression')}
              slotProps={{ htmlInput: { spellCheck: false, autoComplete: 'off' } }}
            />
            <TextField label="Unit" {...fieldOf('unit')} />
          </Box>
          <ChannelList rig={rig} />
          <ValidityFields
            rows={content.validity}
            faultOf={faultOf}
            onChange={(validity) => change({ validity })}
          />
          {problem && <ProblemNotice title="The objective was not saved" error={problem} />}
          <Box sx={{ display: 'flex', gap: 1 }}>
            <Button type="submit" variant="contained" disabled={save.isPending}>
              Save objective
            </Button>
            <Button onClick={onClose}>Cancel</Button>
          </Box>
        </Box>
      </form>
    </Panel>
  );
}
