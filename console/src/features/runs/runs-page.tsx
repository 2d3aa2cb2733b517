import { Link as RouterLink, useSearchParams } from 'react-router-dom';
import Link from '@mui/material/Link';
import Table from '@mui/material/Table';
import TableBody from '@mui/material/TableBody';
import TableCell from '@mui/material/TableCell';
import TableContainer from '@mui/material/TableContainer';
import TableHead from '@mui/material/TableHead';
import TableRow from '@mui/material/TableRow';
import type { RunSummary } from '../../api/index.js';
import { Empty, formatMoment, Loading, Page, ProblemNotice } from '../../components/index.js';
import { useRigs } from '../rigs/index.js';
import { useRuns } from './api/run-queries.js';
import { RunStatusMark } from './run-status-mark.js';

/** The runs of every rig, or of the one that the address names, newest first. */
export function RunsPage() {
  const [search] = useSearchParams();
  const runs = useRuns(search.get('rigId'));
  return (
    <Page title="Runs">
      {runs.isPending && <Loading what="runs" />}
      {runs.error !== null && (
        <ProblemNotice
          title="The runs could not be loaded"
          error={runs.error}
          onRetry={() => void runs.refetch()}
        />
      )}
      {runs.data?.length === 0 && (
        <Empty title="No run yet">Start one from the page of an experiment, once its rig is armed.</Empty>
      )}
      {runs.data && runs.data.length > 0 && <RunTable runs={runs.data} />}
    </Page>
  );
}

function RunTable({ runs }: { runs: readonly RunSummary[] }) {
  const rigs = useRigs();
  const rigTitle = (id: string) => rigs.data?.find((rig) => rig.id === id)?.content.title ?? id;
  return (
    <TableContainer sx={{ border: 1, borderColor: 'divider', bgcolor: 'background.paper' }}>
      <Table size="small" aria-label="Runs">
        <TableHead>
          <TableRow>
            <TableCell>Started</TableCell>
            <TableCell>Experiment</TableCell>
            <TableCell>Rig</TableCell>
            <TableCell>Status</TableCell>
            <TableCell>By</TableCell>
          </TableRow>
        </TableHead>
        <TableBody>
          {runs.map((run) => (
            <TableRow key={run.id} hover>
              <TableCell sx={{ whiteSpace: 'nowrap' }}>
                <Link component={RouterLink} to={`/runs/${run.id}`}>
                  {formatMoment(run.startedAt)}
                </Link>
              </TableCell>
              <TableCell>
                {run.experimentTitle}, version {run.experimentVersion}
              </TableCell>
              <TableCell>{rigTitle(run.rigId)}</TableCell>
              <TableCell>
                <RunStatusMark status={run.status} verdict={run.verdict} />
              </TableCell>
              <TableCell>{run.startedBy}</TableCell>
            </TableRow>
          ))}
        </TableBody>
      </Table>
    </TableContainer>
  );
}
