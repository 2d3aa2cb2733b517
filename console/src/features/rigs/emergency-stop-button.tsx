import { useEffect } from 'react';
import Box from '@mui/material/Box';
import ButtonBase from '@mui/material/ButtonBase';
import type { StopOutcome } from './use-emergency-stop.js';

/** Printed on the button; works wherever the focus is. */
const shortcutText = 'Ctrl+Shift+S';

const isShortcut = (event: KeyboardEvent) =>
  (event.ctrlKey || event.metaKey) && event.shiftKey && event.key.toLowerCase() === 's';

interface EmergencyStopButtonProps {
  /** Title of the rig that it stops; null for all rigs. */
  rigTitle: string | null;
  state: StopOutcome['state'];
  onPress: () => void;
}

/** One press, no confirmation. A software stop and no safety function, and says so. */
export function EmergencyStopButton({ rigTitle, state, onPress }: EmergencyStopButtonProps) {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (!isShortcut(event)) return;
      event.preventDefault();
      if (!event.repeat) onPress();
    };
    window.addEventListener('keydown', onKey, { capture: true });
    return () => window.removeEventListener('keydown', onKey, { capture: true });
  }, [onPress]);
  return (
    <Box sx={{ display: 'flex', alignItems: 'center', gap: 1, flexDirection: 'row-reverse' }}>
      <ButtonBase
        onClick={onPress}
        aria-describedby="stop-is-software"
        aria-keyshortcuts="Control+Shift+S"
        sx={(theme) => ({
          bgcolor: 'paper.stopFace',
          color: '#ffffff',
          border: '2px solid #ffffff',
          outline: `2px solid ${theme.vars.palette.paper.stopFace}`,
          minHeight: 48,
          px: 2,
          flexDirection: 'column',
          textAlign: 'center',
          fontFamily: 'inherit',
          maxWidth: { xs: 210, sm: 320 },
          '&:hover': { filter: 'brightness(0.9)' },
          '&:focus-visible': { outline: `4px solid ${theme.vars.palette.text.primary}`, outlineOffset: 0 },
        })}
      >
        <Box component="span" sx={{ fontWeight: 700, fontSize: '0.9375rem', lineHeight: 1.2 }}>
          {state === 'sending' ? 'STOPPING …' : rigTitle === null ? 'STOP ALL RIGS' : `STOP ${rigTitle}`}
        </Box>
        <Box component="span" sx={{ fontSize: '0.6875rem', lineHeight: 1.3 }}>
          {shortcutText}
        </Box>
      </ButtonBase>
      <Box
        id="stop-is-software"
        sx={{ fontSize: '0.6875rem', lineHeight: 1.3, color: 'text.secondary', maxWidth: '15em' }}
      >
        Software stop, no safety function. In danger use the hard-wired stop.
      </Box>
    </Box>
  );
}
