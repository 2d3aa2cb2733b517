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

/** A textbook hill, px: 44 high at 180. */
const hillAt = (x: number) => 52 - 44 * Math.exp(-(((x - 180) / 75) ** 2));

const hillPath = Array.from(
  { length: 91 },
  (_, index) => `${index === 0 ? 'M' : 'L'}${index * 4} ${hillAt(index * 4).toFixed(1)}`,
).join('');

/** Each step of the climb makes up half of what is left. */
const climb = [0, 1, 2, 3, 4, 5].map((step) => 180 - 128 / 1.75 ** step);

/** An objective over its actuator, and the climb to its top. */
function Hill() {
  return (
    <svg width="100%" viewBox="0 0 360 58" aria-hidden="true" style={{ display: 'block' }}>
      <path d={hillPath} fill="none" stroke="currentColor" strokeWidth="1.5" />
      {climb.map((x) => (
        <circle
          key={x}
          cx={x}
          cy={hillAt(x)}
          r="2.5"
          fill="var(--ch-palette-background-paper)"
          stroke="currentColor"
          strokeWidth="1.2"
        />
      ))}
      <circle cx="180" cy={hillAt(180)} r="3.5" fill="currentColor" />
    </svg>
  );
}
