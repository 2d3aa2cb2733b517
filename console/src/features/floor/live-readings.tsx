import Box from '@mui/material/Box';
import type { Channel, Rig } from '@cresthold/shared';
import { Quantity } from '../../components/index.js';
import { useIsStale, useLatestValue, useRigSamples, type RigSamples } from '../../live/index.js';

/** A card shows so many channels at most; all of them are on the rig's page. */
const shownChannels = 10;

/** The present readings of a rig in one column, aligned on the decimal point; the heartbeat says nothing to people. */
export function LiveReadings({ rig, hiddenChannel }: { rig: Rig; hiddenChannel: string | undefined }) {
  const samples = useRigSamples(rig.id);
  const isStale = useIsStale(samples);
  const channels = rig.channels
    .filter(({ id, kind }) => kind !== 'trace' && id !== hiddenChannel)
    .slice(0, shownChannels);
  const places = {
    fractionPlaces: Math.max(...channels.map(({ display }) => display.decimals)),
    unitPlaces: Math.max(...channels.map(({ unit }) => unit.length)),
  };
  return (
    <Box component="ul" aria-label="Readings" sx={{ m: 0, p: 0, listStyle: 'none', fontSize: '0.8125rem' }}>
      {channels.map((channel) => (
        <Reading key={channel.id} channel={channel} samples={samples} isStale={isStale} places={places} />
      ))}
    </Box>
  );
}

interface ReadingProps {
  channel: Channel;
  samples: RigSamples;
  isStale: boolean;
  places: { fractionPlaces: number; unitPlaces: number };
}

function Reading({ channel, samples, isStale, places }: ReadingProps) {
  const value = useLatestValue(samples, channel.id, 2);
  return (
    <Box
      component="li"
      sx={{
        display: 'flex',
        justifyContent: 'space-between',
        gap: 1,
        '& + &': { borderTop: 1, borderColor: 'divider' },
      }}
    >
      <Box component="span" sx={{ minWidth: 0 }}>
        {channel.title}
      </Box>
      <Quantity
        value={value}
        unit={channel.unit}
        decimals={channel.display.decimals}
        isStale={isStale}
        {...places}
      />
    </Box>
  );
}
