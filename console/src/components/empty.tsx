import type { ReactNode } from 'react';
import Box from '@mui/material/Box';

interface EmptyProps {
  title: string;
  /** What to do to have something here. */
  children?: ReactNode;
}

/** Nothing is here yet, and what to do about it. */
export function Empty({ title, children }: EmptyProps) {
  return (
    <Box sx={{ border: '1px dashed', borderColor: 'paper.outline', p: 2, color: 'text.secondary' }}>
      <Box sx={{ color: 'text.primary', fontWeight: 700 }}>{title}</Box>
      {children}
    </Box>
  );
}
