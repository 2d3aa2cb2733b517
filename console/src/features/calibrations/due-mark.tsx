import Box from '@mui/material/Box';
import type { CalibrationDocument } from '../../api/index.js';

/** Until when a calibration holds; amber once that is past or near. */
export function DueMark({ calibration }: { calibration: Pick<CalibrationDocument, 'content' | 'dueState'> }) {
  const { dueState, content } = calibration;
  if (content.dueOn === null) return <span>does not expire</span>;
  if (dueState === 'current') return <span>due on {content.dueOn}</span>;
  return (
    <Box component="span" sx={{ color: 'paper.warn', fontWeight: 700 }}>
      {dueState === 'overdue' ? `▲ overdue since ${content.dueOn}` : `due soon, on ${content.dueOn}`}
    </Box>
  );
}
