import Box from '@mui/material/Box';
import type { RunStatus, Verdict } from '@cresthold/shared';

/** Only what is abnormal has a colour. */
const statusColours: Partial<Record<RunStatus, string>> = {
  tripped: 'paper.trip',
  interrupted: 'paper.warn',
};

/** Status and verdict of a run in words. */
export function RunStatusMark({ status, verdict }: { status: RunStatus; verdict: Verdict | null }) {
  return (
    <Box component="span" sx={{ fontWeight: 700 }}>
      <Box component="span" sx={{ color: statusColours[status] }}>
        {status}
      </Box>
      {verdict !== null && (
        <>
          {' · verdict '}
          <Box component="span" sx={{ color: verdict === 'pass' ? undefined : 'paper.warn' }}>
            {verdict}
          </Box>
        </>
      )}
    </Box>
  );
}
