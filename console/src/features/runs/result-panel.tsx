import Box from '@mui/material/Box';
import Table from '@mui/material/Table';
import TableBody from '@mui/material/TableBody';
import TableCell from '@mui/material/TableCell';
import TableRow from '@mui/material/TableRow';
import type { RunEvent } from '@cresthold/shared';
import type { RunSummary } from '../../api/index.js';
import { Panel, plainNumber } from '../../components/index.js';

/** Checks and results of the steps, as far as the run has come. */
export function ResultPanel({ run, events }: { run: RunSummary; events: readonly RunEvent[] }) {
  const results = Object.entries({ ...resultsOf(events), ...run.results });
  const checks = events.flatMap(({ body }) => (body.type === 'check.decided' ? [body] : []));
  return (
    <Panel title="Results">
      {run.reason !== null && run.reason !== '' && <Box sx={{ mb: 1 }}>{run.reason}</Box>}
      {checks.map((check) => (
        <Box key={check.step} sx={{ mb: 1, color: check.isMet === true ? undefined : 'paper.warn' }}>
          {check.isMet === null ? '? not judged' : check.isMet ? '✓ met' : '✗ not met'}: {check.criterion}
        </Box>
      ))}
      {results.length === 0 ? (
        <Box sx={{ color: 'text.secondary' }}>No step has left a result yet.</Box>
      ) : (
        <Table size="small" aria-label="Results of the steps">
          <TableBody>
            {results.map(([name, value]) => (
              <TableRow key={name}>
                <TableCell component="th" scope="row" sx={{ overflowWrap: 'anywhere' }}>
                  {name}
                </TableCell>
                <TableCell align="right">{plainNumber(value)}</TableCell>
              </TableRow>
            ))}
          </TableBody>
        </Table>
      )}
    </Panel>
  );
}

function resultsOf(events: readonly RunEvent[]): Record<string, number> {
  return Object.assign(
    {},
    ...events.map(({ body }) => (body.type === 'step.ended' ? body.results : {})),
  ) as Record<string, number>;
}
