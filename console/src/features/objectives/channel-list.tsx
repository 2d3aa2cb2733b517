import Box from '@mui/material/Box';
import type { Rig } from '@cresthold/shared';

/** The names that an expression over this rig may use. */
export function ChannelList({ rig }: { rig: Rig }) {
  return (
    <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
      Channels:{' '}
      {rig.channels.map(({ id, title, unit }, index) => (
        <span key={id}>
          {index > 0 && ' · '}
          <Box component="code" sx={{ color: 'text.primary', fontFamily: 'inherit', fontWeight: 700 }}>
            {id}
          </Box>{' '}
          {title}
          {unit !== '' && ` (${unit})`}
        </span>
      ))}
    </Box>
  );
}
