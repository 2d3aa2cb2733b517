import type { KeyboardEvent, PointerEvent, ReactNode } from 'react';
import Button from '@mui/material/Button';

interface HoldButtonProps {
  /** Whole name for those who cannot see where it stands. */
  name: string;
  isHeld: boolean;
  isDisabled: boolean;
  /** Id of the words that say how it works. */
  describedBy: string;
  onBegin: () => void;
  onEnd: () => void;
  children: ReactNode;
}

const isHoldingKey = ({ key }: KeyboardEvent) => key === ' ' || key === 'Enter';

/** Acts while it is held, by pointer, finger or key, and ends when that leaves it, whatever the way. */
export function HoldButton(props: HoldButtonProps) {
  const { name, isHeld, isDisabled, describedBy, onBegin, onEnd, children } = props;
  const onPointerDown = (event: PointerEvent<HTMLButtonElement>) => {
    if (event.button !== 0) return;
    // A finger is captured by what it touches; then sliding off would not be leaving.
    const { currentTarget: target, pointerId } = event;
    if (target.hasPointerCapture?.(pointerId)) target.releasePointerCapture(pointerId);
    onBegin();
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (!isHoldingKey(event)) return;
    event.preventDefault();
    if (!event.repeat) onBegin();
  };
  return (
    <Button
      variant={isHeld ? 'contained' : 'outlined'}
      aria-label={name}
      aria-pressed={isHeld}
      aria-describedby={describedBy}
      disabled={isDisabled}
      disableRipple
      onPointerDown={onPointerDown}
      onPointerUp={onEnd}
      onPointerCancel={onEnd}
      onPointerLeave={onEnd}
      onKeyDown={onKeyDown}
      onKeyUp={(event) => isHoldingKey(event) && onEnd()}
      onBlur={onEnd}
      onContextMenu={(event) => event.preventDefault()}
      sx={{
        minHeight: 48,
        minWidth: 56,
        touchAction: 'none',
        userSelect: 'none',
        WebkitTouchCallout: 'none',
      }}
    >
      {children}
    </Button>
  );
}
