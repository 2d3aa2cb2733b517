import { useEffect, type ReactNode } from 'react';
import Box from '@mui/material/Box';
import Typography from '@mui/material/Typography';

/** The page before the door: the product's name on a sheet of ruled paper, and one form. */
export function GatePage({ title, children }: { title: string; children: ReactNode }) {
  useEffect(() => {
    document.title = `${title} · Cresthold`;
  }, [title]);
  return (
    <Box
      component="main"
      sx={(theme) => ({
        minHeight: '100dvh',
        display: 'grid',
        placeItems: 'center',
        p: 2,
        backgroundImage: `linear-gradient(${theme.vars.palette.paper.grid} 1px, transparent 1px), linear-gradient(90deg, ${theme.vars.palette.paper.grid} 1px, transparent 1px)`,
        backgroundSize: '24px 24px',
      })}
    >
      <Box
        sx={{
          width: '100%',
          maxWidth: 420,
          border: 1,
          borderColor: 'text.primary',
          bgcolor: 'background.paper',
        }}
      >
        <Box sx={{ p: 2.5, borderBottom: 1, borderColor: 'divider' }}>
          <Hill />
          <Box sx={{ fontWeight: 700, letterSpacing: '0.22em', mt: 1 }}>CRESTHOLD</Box>
          <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
            Finds, holds and proves the best operating point of a machine on a bench.
          </Box>
        </Box>
        <Box sx={{ p: 2.5, display: 'grid', gap: 2 }}>
          <Typography variant="h1">{title}</Typography>
          {children}
        </Box>
      </Box>
    </Box>
  );
}

/** An objective over its actuator, and the dither that holds its top. */
function Hill() {
  return (
    <svg width="100%" height="56" viewBox="0 0 360 56" preserveAspectRatio="none" aria-hidden="true">
      <path
        d="M0 52C90 52 110 8 180 8s90 44 180 44"
        fill="none"
        stroke="currentColor"
        strokeWidth="1.5"
        vectorEffect="non-scaling-stroke"
      />
      <path
        d="M0 50C60 50 84 36 104 27q6-9 10 0t10-8 10 0 10-8 10 1 10-5 10 0 10-1 10 2 10-2"
        fill="none"
        stroke="currentColor"
        strokeWidth="1"
        strokeDasharray="2 2"
        vectorEffect="non-scaling-stroke"
        opacity="0.6"
      />
    </svg>
  );
}
