import { useMemo, useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import Typography from '@mui/material/Typography';
import type { Channel, EnvelopeContent, Rig } from '@cresthold/shared';
import { StripChart } from '../../components/strip-chart/index.js';
import type { RigSamples } from '../../live/index.js';
import { channelLevels } from './channel-levels.js';

const spansS = [15, 60, 180, 600];

interface RigChartsProps {
  rig: Rig;
  envelope: EnvelopeContent | undefined;
  samples: RigSamples;
}

/** One strip chart per channel, all over the same span; paused and fitted together. */
export function RigCharts({ rig, envelope, samples }: RigChartsProps) {
  const [spanS, setSpanS] = useState(60);
  const [isPaused, setPaused] = useState(false);
  const [isFitted, setFitted] = useState(false);
  // Traces are drawn over their own axis, not over time.
  const channels = rig.channels.filter(
    ({ id, kind }) => kind !== 'trace' && id !== envelope?.heartbeat?.channel,
  );
  return (
    <Box component="section" aria-labelledby="live-heading" sx={{ display: 'grid', gap: 1, minWidth: 0 }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', alignItems: 'center', gap: 1 }}>
        <Typography id="live-heading" variant="h2" sx={{ flex: '1 1 6rem' }}>
          Live
        </Typography>
        <TextField
          select
          label="Span"
          value={spanS}
          onChange={(event) => setSpanS(Number(event.target.value))}
          sx={{ width: '7.5rem' }}
        >
          {spansS.map((span) => (
            <MenuItem key={span} value={span}>
              {span < 120 ? `${span} s` : `${span / 60} min`}
            </MenuItem>
          ))}
        </TextField>
        <Button
          aria-pressed={isFitted}
          variant={isFitted ? 'contained' : 'outlined'}
          onClick={() => setFitted(!isFitted)}
        >
          Fit values
        </Button>
        <Button
          aria-pressed={isPaused}
          variant={isPaused ? 'contained' : 'outlined'}
          onClick={() => setPaused(!isPaused)}
        >
          {isPaused ? 'Paused' : 'Pause'}
        </Button>
      </Box>
      <Box
        sx={{
          display: 'grid',
          gap: 1,
          gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 26rem), 1fr))',
        }}
      >
        {channels.map((channel) => (
          <ChannelChart
            key={channel.id}
            channel={channel}
            {...{ envelope, samples, spanS, isPaused, isFitted }}
          />
        ))}
      </Box>
    </Box>
  );
}

interface ChannelChartProps {
  channel: Channel;
  envelope: EnvelopeContent | undefined;
  samples: RigSamples;
  spanS: number;
  isPaused: boolean;
  isFitted: boolean;
}

function ChannelChart({ channel, envelope, isFitted, ...chart }: ChannelChartProps) {
  const traces = useMemo(
    () => [
      {
        column: channel.id,
        label: channel.title,
        unit: channel.unit,
        decimals: channel.display.decimals,
        colour: 0,
      },
    ],
    [channel],
  );
  const levels = useMemo(() => channelLevels(channel.id, envelope), [channel.id, envelope]);
  return <StripChart {...chart} traces={traces} levels={levels} range={isFitted ? null : channel.display} />;
}
