import { useState, type SubmitEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import { titleSchema } from '@cresthold/shared';
import type { RigDocument } from '../../api/index.js';
import { ProblemNotice } from '../../components/index.js';
import { useEnvelopeInForce } from '../envelopes/index.js';
import { useRigObjectives } from '../objectives/index.js';
import { useCreateExperiment } from './api/experiment-changes.js';
import { startingGraph, startingGraphs, type StartingGraph } from './graph/starting-graphs.js';

interface NewExperimentDialogProps {
  rigs: readonly RigDocument[];
  rigId: string;
  onClose: () => void;
}

/** Asks for what an experiment cannot begin without, makes it and goes to its editor. */
export function NewExperimentDialog({ rigs, rigId: firstRigId, onClose }: NewExperimentDialogProps) {
  const [title, setTitle] = useState('');
  const [fault, setFault] = useState<string | null>(null);
  const [rigId, setRigId] = useState(firstRigId);
  const [begin, setBegin] = useState<StartingGraph>('seek');
  const envelope = useEnvelopeInForce(rigId);
  const objectives = useRigObjectives(rigId);
  const create = useCreateExperiment();
  const navigate = useNavigate();
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    const rig = rigs.find((other) => other.id === rigId)?.content;
    const outcome = titleSchema.safeParse(title);
    setFault(outcome.success ? null : (outcome.error.issues[0]?.message ?? 'Give a title.'));
    if (!outcome.success || !rig) return;
    const rangeOf = (channel: string) =>
      envelope?.content.limits.find((limit) => limit.channel === channel) ?? null;
    const content = {
      title: outcome.data,
      objectiveId: objectives.data?.[0]?.id ?? null,
      graph: startingGraph(begin, { rig, rangeOf }),
    };
    create.mutate({ rigId, content }, { onSuccess: ({ id }) => void navigate(`/experiments/${id}`) });
  };
  return (
    <Dialog open onClose={onClose} aria-labelledby="new-experiment-title" maxWidth="sm" fullWidth>
      <form onSubmit={submit} noValidate>
        <DialogTitle id="new-experiment-title" variant="h3">
          New experiment
        </DialogTitle>
        <DialogContent sx={{ display: 'grid', gap: 2, pt: '8px !important' }}>
          <TextField
            label="Title"
            value={title}
            onChange={(event) => setTitle(event.target.value)}
            error={fault !== null}
            helperText={fault}
            autoFocus
          />
          <TextField select label="Rig" value={rigId} onChange={(event) => setRigId(event.target.value)}>
            {rigs.map((rig) => (
              <MenuItem key={rig.id} value={rig.id}>
                {rig.content.title}
              </MenuItem>
            ))}
          </TextField>
          <TextField
            select
            label="Begin with"
            value={begin}
            onChange={({ target }) => setBegin(target.value === 'empty' ? 'empty' : 'seek')}
          >
            {(Object.keys(startingGraphs) as StartingGraph[]).map((key) => (
              <MenuItem key={key} value={key}>
                {startingGraphs[key].title}
              </MenuItem>
            ))}
          </TextField>
          {create.error !== null && <ProblemNotice title="Not made" error={create.error} />}
        </DialogContent>
        <DialogActions>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" variant="contained" disabled={create.isPending}>
            Make experiment
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
