import { useId, useState } from 'react';
import Box from '@mui/material/Box';
import InputAdornment from '@mui/material/InputAdornment';
import TextField from '@mui/material/TextField';
import type { ActuatorLimit, Channel } from '@cresthold/shared';
import { asProblem } from '../../api/index.js';
import { plainNumber } from '../../components/index.js';
import { HoldButton } from './hold-button.js';
import { parseMove } from './parse-move.js';
import { useHeldPress } from './use-held-press.js';

interface ManualMoveProps {
  rigId: string;
  channel: Channel;
  limit: ActuatorLimit;
  /** Why it cannot be moved now; null where it can. */
  obstacle: string | null;
}

/** Moves one actuator through the guard while a button is held: to a number, or down and up. */
export function ManualMove({ rigId, channel, limit, obstacle }: ManualMoveProps) {
  const [text, setText] = useState('');
  const [fault, setFault] = useState<string | null>(null);
  const held = useHeldPress(rigId, channel.id);
  const wordsId = useId();
  const begin = (name: string, value: number) => {
    setFault(null);
    held.begin(name, value);
  };
  const beginToGoal = () => {
    const input = parseMove(text, limit, channel.unit);
    if (input.isOk) begin('goal', input.value);
    else setFault(input.message);
  };
  const problem = held.error ? asProblem(held.error) : null;
  const shown = fault ?? problem?.fieldMessage('value') ?? problem?.message ?? null;
  const button = (name: string) => ({
    isHeld: held.heldName === name,
    isDisabled: obstacle !== null,
    describedBy: wordsId,
    onEnd: held.end,
  });
  const towards = (value: number) => `${plainNumber(value)} ${channel.unit}`.trim();
  return (
    <Box role="group" aria-label={`Move ${channel.title} by hand`}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, alignItems: 'flex-start' }}>
        <TextField
          label={`Move ${channel.title} to`}
          value={text}
          onChange={(event) => setText(event.target.value)}
          disabled={obstacle !== null}
          error={shown !== null}
          helperText={shown}
          sx={{ flex: '1 1 10rem', minWidth: 0 }}
          slotProps={{
            htmlInput: { inputMode: 'decimal', autoComplete: 'off', 'aria-describedby': wordsId },
            input: { endAdornment: <InputAdornment position="end">{channel.unit}</InputAdornment> },
          }}
        />
        <HoldButton {...button('goal')} name={`Hold to move ${channel.title}`} onBegin={beginToGoal}>
          Hold to move
        </HoldButton>
        <HoldButton
          {...button('down')}
          name={`− Hold to move ${channel.title} down, at most to ${towards(limit.min)}`}
          onBegin={() => begin('down', limit.min)}
        >
          −
        </HoldButton>
        <HoldButton
          {...button('up')}
          name={`+ Hold to move ${channel.title} up, at most to ${towards(limit.max)}`}
          onBegin={() => begin('up', limit.max)}
        >
          +
        </HoldButton>
      </Box>
      <Box id={wordsId} sx={{ fontSize: '0.75rem', color: 'text.secondary', mt: 0.25 }}>
        {obstacle ?? 'Moves only while a button is held. Let go, and it stops where it is.'}
      </Box>
    </Box>
  );
}
