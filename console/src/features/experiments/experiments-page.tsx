import { useState } from 'react';
import { Link as RouterLink, useSearchParams } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import MenuItem from '@mui/material/MenuItem';
import Table from '@mui/material/Table';
import TableBody from '@mui/material/TableBody';
import TableCell from '@mui/material/TableCell';
import TableContainer from '@mui/material/TableContainer';
import TableHead from '@mui/material/TableHead';
import TableRow from '@mui/material/TableRow';
import TextField from '@mui/material/TextField';
import type { ExperimentSummary, RigDocument } from '../../api/index.js';
import { Empty, formatMoment, GatedButton, Loading, Page, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useRigs } from '../rigs/index.js';
import { useExperiments } from './api/experiment-queries.js';
import { NewExperimentDialog } from './new-experiment-dialog.js';

const everyRig = '';

/** All experiments, of one rig or of every rig. */
export function ExperimentsPage() {
  const [search, setSearch] = useSearchParams();
  const rigId = search.get('rigId');
  const experiments = useExperiments(rigId);
  const rigs = useRigs();
  const [isNewOpen, setNewOpen] = useState(false);
  const obstacle = useObstacle('experiment.edit');
  const firstRig = rigId ?? rigs.data?.[0]?.id;
  return (
    <Page
      title="Experiments"
      actions={
        <GatedButton
          variant="contained"
          obstacle={obstacle ?? (firstRig === undefined ? 'There is no rig yet.' : null)}
          onClick={() => setNewOpen(true)}
        >
          New experiment
        </GatedButton>
      }
    >
      {rigs.data && rigs.data.length > 1 && (
        <TextField
          select
          label="Rig"
          value={rigId ?? everyRig}
          onChange={({ target }) => setSearch(target.value === everyRig ? {} : { rigId: target.value })}
          sx={{ maxWidth: '20rem' }}
        >
          <MenuItem value={everyRig}>every rig</MenuItem>
          {rigs.data.map((rig) => (
            <MenuItem key={rig.id} value={rig.id}>
              {rig.content.title}
            </MenuItem>
          ))}
        </TextField>
      )}
      {experiments.isPending && <Loading what="experiments" />}
      {experiments.error !== null && (
        <ProblemNotice
          title="The experiments could not be loaded"
          error={experiments.error}
          onRetry={() => void experiments.refetch()}
        />
      )}
      {experiments.data && <ExperimentTable experiments={experiments.data} rigs={rigs.data ?? []} />}
      {isNewOpen && rigs.data && firstRig !== undefined && (
        <NewExperimentDialog rigs={rigs.data} rigId={firstRig} onClose={() => setNewOpen(false)} />
      )}
    </Page>
  );
}

interface ExperimentTableProps {
  experiments: readonly ExperimentSummary[];
  rigs: readonly RigDocument[];
}

function ExperimentTable({ experiments, rigs }: ExperimentTableProps) {
  if (experiments.length === 0) {
    return (
      <Empty title="No experiment yet">
        A test engineer draws one: survey the landscape, seek the best point, check the gain.
      </Empty>
    );
  }
  const rigTitle = (rigId: string) => rigs.find((rig) => rig.id === rigId)?.content.title ?? rigId;
  return (
    <TableContainer sx={{ border: 1, borderColor: 'divider', bgcolor: 'background.paper' }}>
      <Table size="small" aria-label="Experiments">
        <TableHead>
          <TableRow>
            <TableCell>Title</TableCell>
            <TableCell>Rig</TableCell>
            <TableCell align="right">Version</TableCell>
            <TableCell>Made</TableCell>
          </TableRow>
        </TableHead>
        <TableBody>
          {experiments.map((experiment) => (
            <TableRow key={experiment.id} hover>
              <TableCell>
                <Link component={RouterLink} to={`/experiments/${experiment.id}`}>
                  {experiment.title}
                </Link>
              </TableCell>
              <TableCell>{rigTitle(experiment.rigId)}</TableCell>
              <TableCell align="right">{experiment.latestVersion}</TableCell>
              <TableCell>
                <Box component="span" sx={{ whiteSpace: 'nowrap' }}>
                  {formatMoment(experiment.createdAt)}
                </Box>
                , {experiment.createdBy}
              </TableCell>
            </TableRow>
          ))}
        </TableBody>
      </Table>
    </TableContainer>
  );
}
