import Box from '@mui/material/Box';
import type { RigPhase } from '@cresthold/shared';

/** Phases are told apart by shape and word; only what is abnormal has a colour as well. */
const marks: Record<RigPhase, string> = {
  offline: 'M2 2l8 8M10 2l-8 8',
  idle: 'M2 2h8v8H2z',
  armed: 'M2 2h8v8H2zM2 6h8v4H2z',
  running: 'M2 1.5l8.5 4.5L2 10.5z',
  stopping: 'M2 2h3v8H2zM7 2h3v8H7z',
  tripped: 'M6 1l5.5 10H.5z',
};

const isFilled: Record<RigPhase, boolean> = {
  offline: false,
  idle: false,
  armed: true,
  running: true,
  stopping: true,
  tripped: true,
};

const colours: Partial<Record<RigPhase, string>> = { tripped: 'paper.trip', offline: 'paper.warn' };

interface PhaseMarkProps {
  phase: RigPhase;
  isPaused?: boolean;
  isLockedOut?: boolean;
}

/** The phase of a rig: mark and word. */
export function PhaseMark({ phase, isPaused = false, isLockedOut = false }: PhaseMarkProps) {
  const word = phase === 'running' && isPaused ? 'paused' : phase;
  return (
    <Box
      component="span"
      sx={{ color: colours[phase], fontWeight: 700, display: 'inline-flex', gap: 0.75, alignItems: 'center' }}
    >
      <svg width="12" height="12" viewBox="0 0 12 12" aria-hidden="true">
        <path
          d={phase === 'armed' ? 'M2 6h8v4H2z' : marks[phase]}
          fill={isFilled[phase] ? 'currentColor' : 'none'}
          stroke="currentColor"
          strokeWidth="1.5"
        />
        {phase === 'armed' && <path d="M2 2h8v8H2z" fill="none" stroke="currentColor" strokeWidth="1.5" />}
      </svg>
      {word}
      {isLockedOut && (
        <Box component="span" sx={{ color: 'paper.warn' }}>
          · locked out
        </Box>
      )}
    </Box>
  );
}
