import type { ReactNode, RefObject } from 'react';
import Box from '@mui/material/Box';
import type { Theme } from '@mui/material/styles';

/** Feed holes along both edges, as recorder paper has them. */
const feedHoles = (theme: Theme) => ({
  width: 10,
  flex: 'none',
  backgroundImage: `radial-gradient(circle at 50% 50%, ${theme.vars.palette.background.default} 0 2.5px, ${theme.vars.palette.divider} 2.5px 3.2px, transparent 3.4px)`,
  backgroundSize: '10px 16px',
});

interface ChartSheetProps {
  heading: ReactNode;
  /** What the drawing shows, in words, for those who do not see it. */
  summary: string;
  frameRef: RefObject<HTMLDivElement | null>;
  heightPx: number;
  isStale?: boolean;
}

/** The sheet that a chart is drawn on. */
export function ChartSheet({ heading, summary, frameRef, heightPx, isStale = false }: ChartSheetProps) {
  return (
    <Box sx={{ border: 1, borderColor: 'divider', bgcolor: 'background.paper', minWidth: 0 }}>
      <Box sx={{ px: 1.5, py: 0.5, borderBottom: 1, borderColor: 'divider' }}>{heading}</Box>
      <Box sx={{ display: 'flex' }}>
        <Box aria-hidden="true" sx={feedHoles} />
        <Box role="img" aria-label={summary} sx={{ flex: 1, minWidth: 0, opacity: isStale ? 0.45 : 1 }}>
          <Box ref={frameRef} sx={{ height: heightPx, overflow: 'hidden' }} />
        </Box>
        <Box aria-hidden="true" sx={feedHoles} />
      </Box>
    </Box>
  );
}
