import Box from '@mui/material/Box';
import type { Rig } from '@cresthold/shared';
import { Quantity } from '../../components/index.js';

interface BestPointProps {
  rig: Rig;
  /** Best-known value by actuator, channel unit. */
  point: Record<string, number>;
}

/** The best-known point of the run, one line per actuator, aligned on the decimal point. */
export function BestPoint({ rig, point }: BestPointProps) {
  const lines = rig.channels.filter((channel) => channel.id in point);
  if (lines.length === 0) return <>none yet</>;
  const fractionPlaces = Math.max(...lines.map((channel) => channel.display.decimals));
  return (
    <Box sx={{ display: 'grid', gap: 0.25 }}>
      {lines.map((channel) => (
        <Box
          key={channel.id}
          sx={{ display: 'flex', justifyContent: 'space-between', gap: 2, fontWeight: 700 }}
        >
          <span>{channel.title}</span>
          <Quantity
            value={point[channel.id]}
            unit={channel.unit}
            decimals={channel.display.decimals}
            integerPlaces={5}
            fractionPlaces={fractionPlaces}
          />
        </Box>
      ))}
    </Box>
  );
}
