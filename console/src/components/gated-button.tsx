import { useId, type ReactNode } from 'react';
import Box from '@mui/material/Box';
import Button, { type ButtonProps } from '@mui/material/Button';

interface GatedButtonProps extends Pick<ButtonProps, 'variant' | 'color' | 'type' | 'onClick'> {
  /** Why it may not be used now, in words; null where it may. */
  obstacle: string | null;
  isBusy?: boolean;
  children: ReactNode;
}

/** A button that says in words below itself why it cannot be used. */
export function GatedButton({ obstacle, isBusy = false, children, ...button }: GatedButtonProps) {
  const reasonId = useId();
  return (
    <Box
      sx={{ display: 'inline-flex', flexDirection: 'column', alignItems: 'flex-start', maxWidth: '18rem' }}
    >
      <Button
        {...button}
        disabled={obstacle !== null || isBusy}
        aria-describedby={obstacle === null ? undefined : reasonId}
      >
        {children}
      </Button>
      {obstacle !== null && (
        <Box id={reasonId} sx={{ fontSize: '0.75rem', color: 'text.secondary', lineHeight: 1.35, mt: 0.25 }}>
          {obstacle}
        </Box>
      )}
    </Box>
  );
}
