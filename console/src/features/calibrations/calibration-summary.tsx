import { Link } from 'react-router-dom';
import Box from '@mui/material/Box';
import type { Rig } from '@cresthold/shared';
import { Notice, Panel } from '../../components/index.js';
import { useCalibrations } from './api/calibrations.js';
import { conversionText } from './conversion-text.js';
import { DueMark } from './due-mark.js';

/** What is calibrated and until when, only to be read; nothing where no sensor is. */
export function CalibrationSummary({ rig }: { rig: Rig }) {
  const { data } = useCalibrations(rig.id);
  const inForce = data?.filter(({ status }) => status === 'in-force') ?? [];
  if (inForce.length === 0) return null;
  const overdue = inForce.filter(({ dueState }) => dueState === 'overdue').length;
  const titleOf = (id: string) => rig.channels.find((channel) => channel.id === id)?.title ?? id;
  return (
    <Panel title="Calibration" actions={<Link to={`/rigs/${rig.id}/wiring`}>Wiring and calibration</Link>}>
      {overdue > 0 && (
        <Box sx={{ mb: 1 }}>
          <Notice
            kind="warn"
            title={overdue === 1 ? 'A calibration is overdue' : `${overdue} calibrations are overdue`}
          >
            A run may start all the same; its record will say so.
          </Notice>
        </Box>
      )}
      <Box
        component="ul"
        sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 0.75, fontSize: '0.8125rem' }}
      >
        {inForce.map((calibration) => (
          <li key={calibration.id}>
            <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, justifyContent: 'space-between' }}>
              <strong>{titleOf(calibration.channel)}</strong>
              <DueMark calibration={calibration} />
            </Box>
            <Box sx={{ color: 'text.secondary' }}>{conversionText(calibration.content.conversion)}</Box>
          </li>
        ))}
      </Box>
    </Panel>
  );
}
