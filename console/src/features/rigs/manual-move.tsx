import { useId, useState, type SubmitEvent } from 'react';
import Box from '@mui/material/Box';
import InputAdornment from '@mui/material/InputAdornment';
import TextField from '@mui/material/TextField';
import Button from '@mui/material/Button';
import type { ActuatorLimit, Channel } from '@cresthold/shared';
import { asProblem } from '../../api/index.js';
import { useMove } from './api/rig-commands.js';
import { parseMove } from './parse-move.js';

interface ManualMoveProps {
  rigId: string;
  channel: Channel;
  limit: ActuatorLimit;
  /** Why it cannot be moved now; null where it can. */
  obstacle: string | null;
}

/** Moves one actuator through the guard: a number in its unit, inside its limits, at its slew limit. */
export function ManualMove({ rigId, channel, limit, obstacle }: ManualMoveProps) {
  const [text, setText] = useState('');
  const [fault, setFault] = useState<string | null>(null);
  const move = useMove(rigId);
  const reasonId = useId();
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    const input = parseMove(text, limit, channel.unit);
    setFault(input.isOk ? null : input.message);
    if (input.isOk) move.mutate({ channel: channel.id, value: input.value });
  };
  const problem = move.error ? asProblem(move.error) : null;
  const shown = fault ?? problem?.fieldMessage('value') ?? problem?.message ?? null;
  return (
    <form onSubmit={submit} noValidate>
      <Box sx={{ display: 'flex', gap: 1, alignItems: 'flex-start' }}>
        <TextField
          label={`Move ${channel.title} to`}
          value={text}
          onChange={(event) => setText(event.target.value)}
          disabled={obstacle !== null}
          error={shown !== null}
          helperText={shown}
          sx={{ flex: 1, minWidth: 0 }}
          slotProps={{
            htmlInput: {
              inputMode: 'decimal',
              autoComplete: 'off',
              'aria-describedby': obstacle === null ? undefined : reasonId,
            },
            input: { endAdornment: <InputAdornment position="end">{channel.unit}</InputAdornment> },
          }}
        />
        <Button type="submit" disabled={obstacle !== null || move.isPending} sx={{ minHeight: 40 }}>
          Move
        </Button>
      </Box>
      {obstacle !== null && (
        <Box id={reasonId} sx={{ fontSize: '0.75rem', color: 'text.secondary', mt: 0.25 }}>
          {obstacle}
        </Box>
      )}
    </form>
  );
}
