import { Link as RouterLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import { formatMoment, Loading, Panel, ProblemNotice } from '../../components/index.js';
import { useRecentRuns } from './api/recent-runs.js';

export function RecentRuns({ rigId }: { rigId: string }) {
  const runs = useRecentRuns(rigId);
  return (
    <Panel title="Recent runs">
      {runs.isPending && <Loading what="runs" />}
      {runs.error !== null && (
        <ProblemNotice
          title="The runs could not be loaded"
          error={runs.error}
          onRetry={() => void runs.refetch()}
        />
      )}
      {runs.data?.length === 0 && <Box sx={{ color: 'text.secondary' }}>No run on this rig yet.</Box>}
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1 }}>
        {runs.data?.map((run) => (
          <Box component="li" key={run.id}>
            <Link component={RouterLink} to={`/runs/${run.id}`}>
              {run.experimentTitle}
            </Link>
            <Box
              sx={{
                fontSize: '0.75rem',
                color: 'text.secondary',
                display: 'flex',
                flexWrap: 'wrap',
                columnGap: 2,
                justifyContent: 'space-between',
              }}
            >
              <span>{formatMoment(run.startedAt)}</span>
              <span>{run.verdict === null ? run.status : `${run.status} · ${run.verdict}`}</span>
            </Box>
          </Box>
        ))}
      </Box>
    </Panel>
  );
}
