import type { ReactNode } from 'react';
import Box from '@mui/material/Box';
import { traceColour, usePaper } from '../../theme/index.js';
import type { ChartTrace } from './chart-trace.js';

/** The line of a trace beside its name, and its value where there is one. */
export function TraceKey({ trace, children }: { trace: ChartTrace; children?: ReactNode }) {
  const paper = usePaper();
  return (
    <Box sx={{ display: 'flex', alignItems: 'center', gap: 1, minWidth: 0 }}>
      <svg width="18" height="8" aria-hidden="true" style={{ flex: 'none' }}>
        <line
          x1="0"
          y1="4"
          x2="18"
          y2="4"
          stroke={traceColour(paper, trace.colour)}
          strokeWidth="2"
          strokeDasharray={trace.isDashed ? '5 3' : undefined}
        />
      </svg>
      <Box component="span" sx={{ flex: 1, minWidth: 0, fontSize: '0.8125rem' }}>
        {trace.label}
      </Box>
      {children}
    </Box>
  );
}
