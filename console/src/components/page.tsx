import { useEffect, type ReactNode } from 'react';
import Box from '@mui/material/Box';
import Typography from '@mui/material/Typography';

interface PageProps {
  title: string;
  /** Shown above the title: where this page belongs. */
  trail?: ReactNode;
  /** Below the title: what this is about. */
  lead?: string;
  /** Beside the title. */
  aside?: ReactNode;
  actions?: ReactNode;
  children: ReactNode;
}

/** One page: its title in window and heading, its actions, its panels below each other. */
export function Page({ title, trail, lead = '', aside, actions, children }: PageProps) {
  useEffect(() => {
    document.title = `${title} · Cresthold`;
  }, [title]);
  return (
    <Box
      sx={{
        px: { xs: 1.5, sm: 2, lg: 3 },
        py: 2,
        display: 'grid',
        gap: 2,
        gridTemplateColumns: 'minmax(0, 1fr)',
      }}
    >
      <Box sx={{ display: 'flex', flexWrap: 'wrap', alignItems: 'start', columnGap: 2, rowGap: 1 }}>
        <Box sx={{ flex: '1 1 16rem', minWidth: 0 }}>
          {trail !== undefined && <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>{trail}</Box>}
          <Box sx={{ display: 'flex', flexWrap: 'wrap', alignItems: 'baseline', columnGap: 2 }}>
            <Typography variant="h1">{title}</Typography>
            {aside}
          </Box>
          {lead !== '' && (
            <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary', maxWidth: '80ch' }}>{lead}</Box>
          )}
        </Box>
        {actions !== undefined && <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>{actions}</Box>}
      </Box>
      {children}
    </Box>
  );
}
