import { useId, type ReactNode } from 'react';
import Box from '@mui/material/Box';
import Typography from '@mui/material/Typography';
import { PanelBoundary } from './panel-boundary.js';

interface PanelProps {
  title: string;
  /** Controls at the right of the title. */
  actions?: ReactNode;
  /** Without padding, for tables and charts that reach the edge. */
  isFlush?: boolean;
  children: ReactNode;
}

/** A sheet of paper with a heading; a fault inside stays inside. */
export function Panel({ title, actions, isFlush = false, children }: PanelProps) {
  const headingId = useId();
  return (
    <Box
      component="section"
      aria-labelledby={headingId}
      sx={{ border: 1, borderColor: 'divider', bgcolor: 'background.paper', minWidth: 0 }}
    >
      <Box
        sx={{
          display: 'flex',
          flexWrap: 'wrap',
          alignItems: 'center',
          gap: 1,
          minHeight: 40,
          px: 1.5,
          py: 0.5,
          borderBottom: 1,
          borderColor: 'divider',
        }}
      >
        <Typography id={headingId} variant="h2" sx={{ flex: 1 }}>
          {title}
        </Typography>
        {actions}
      </Box>
      <Box sx={{ p: isFlush ? 0 : 1.5 }}>
        <PanelBoundary name={title}>{children}</PanelBoundary>
      </Box>
    </Box>
  );
}
