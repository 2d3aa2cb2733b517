import { Link as RouterLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import { PhaseMark } from '../../components/index.js';
import type { RigDocument } from '../../api/index.js';
import { useLinkState, useRigStatus } from '../../live/index.js';

/** The state of every rig in one line; scrolls inside itself where there are many. */
export function RigStrip({ rigs, rigIdInView }: { rigs: RigDocument[]; rigIdInView: string | null }) {
  return (
    <Box
      component="ul"
      aria-label="State of every rig"
      tabIndex={rigs.length > 3 ? 0 : undefined}
      sx={{
        display: 'flex',
        m: 0,
        p: 0,
        listStyle: 'none',
        overflowX: 'auto',
        flex: '1 1 12rem',
        minWidth: 0,
        alignSelf: 'stretch',
      }}
    >
      {rigs.map((rig) => (
        <Box component="li" key={rig.id} sx={{ borderRight: 1, borderColor: 'divider', flex: 'none' }}>
          <RigStripEntry rig={rig} isInView={rig.id === rigIdInView} />
        </Box>
      ))}
    </Box>
  );
}

function RigStripEntry({ rig, isInView }: { rig: RigDocument; isInView: boolean }) {
  const status = useRigStatus(rig.id, rig.status);
  const isPast = useLinkState() !== 'up';
  return (
    <Box
      component={RouterLink}
      to={`/rigs/${rig.id}`}
      aria-current={isInView ? 'true' : undefined}
      sx={{
        display: 'flex',
        flexDirection: 'column',
        justifyContent: 'center',
        height: '100%',
        px: 1.5,
        py: 0.75,
        color: 'inherit',
        textDecoration: 'none',
        fontSize: '0.75rem',
        lineHeight: 1.4,
        bgcolor: isInView ? 'paper.shade' : undefined,
        '&:hover': { textDecoration: 'underline' },
        '&:focus-visible': { outlineOffset: '-3px' },
      }}
    >
      <span>{rig.content.title}</span>
      <Box component="span" sx={{ fontSize: '0.8125rem', fontStyle: isPast ? 'italic' : undefined }}>
        {status ? (
          <PhaseMark phase={status.phase} isPaused={status.isPaused} isLockedOut={status.isLockedOut} />
        ) : (
          'not known'
        )}
        {isPast && status !== null && ' (last known)'}
      </Box>
    </Box>
  );
}
