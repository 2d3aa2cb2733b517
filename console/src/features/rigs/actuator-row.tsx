import Box from '@mui/material/Box';
import type { ActuatorLimit, Channel } from '@cresthold/shared';
import { formatNumber, plainNumber, Quantity } from '../../components/index.js';
import { useIsStale, useLatestValue, type RigSamples } from '../../live/index.js';
import { ActuatorBar } from './actuator-bar.js';
import { ManualMove } from './manual-move.js';

interface ActuatorRowProps {
  rigId: string;
  channel: Channel;
  limit: ActuatorLimit | undefined;
  samples: RigSamples;
  moveObstacle: string | null;
}

/** One actuator: what it reads, where it stands between its limits, and the way to move it by hand. */
export function ActuatorRow({ rigId, channel, limit, samples, moveObstacle }: ActuatorRowProps) {
  const readBack = useLatestValue(samples, channel.id);
  const applied = useLatestValue(samples, `${channel.id}.applied`);
  const isStale = useIsStale(samples);
  const { decimals } = channel.display;
  const say = (value: number) => `${formatNumber(value, decimals)} ${channel.unit}`.trim();
  return (
    <Box
      component="li"
      sx={{ p: 1.5, '& + &': { borderTop: 1, borderColor: 'divider' }, display: 'grid', gap: 1 }}
    >
      <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, justifyContent: 'space-between' }}>
        <Box component="span" sx={{ fontWeight: 700 }}>
          {channel.title}
        </Box>
        <span>
          <Quantity value={readBack} unit={channel.unit} decimals={decimals} isStale={isStale} />
        </span>
      </Box>
      {limit ? (
        <>
          <ActuatorBar
            {...limit}
            readBack={readBack}
            applied={applied}
            summary={`${channel.title}: read back ${say(readBack)}, written ${say(applied)}; limits ${say(limit.min)} to ${say(limit.max)}, rest ${say(limit.rest)}`}
          />
          <LimitFacts limit={limit} channel={channel} />
          <ManualMove rigId={rigId} channel={channel} limit={limit} obstacle={moveObstacle} />
        </>
      ) : (
        <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
          No approved limit: this actuator cannot be written.
        </Box>
      )}
    </Box>
  );
}

function LimitFacts({ limit, channel }: { limit: ActuatorLimit; channel: Channel }) {
  const unit = channel.unit;
  return (
    <Box
      sx={{
        display: 'flex',
        justifyContent: 'space-between',
        fontSize: '0.75rem',
        color: 'text.secondary',
        mt: -0.75,
        gap: 1,
      }}
    >
      <span>{plainNumber(limit.min)}</span>
      <Box component="span" sx={{ textAlign: 'center' }}>
        rest {plainNumber(limit.rest)} {unit} · slew {plainNumber(limit.slewPerS)} {unit}/s
      </Box>
      <span>
        {plainNumber(limit.max)} {unit}
      </span>
    </Box>
  );
}
