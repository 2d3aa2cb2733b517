import Box from '@mui/material/Box';
import type { EnvelopeContent, Rig, RigStatus } from '@cresthold/shared';
import { Panel } from '../../components/index.js';
import type { RigSamples } from '../../live/index.js';
import { useObstacle } from '../auth/index.js';
import { ActuatorRow } from './actuator-row.js';
import { moveObstacle } from './rig-obstacles.js';

interface ActuatorPanelProps {
  rig: Rig;
  status: RigStatus | null;
  envelope: EnvelopeContent | undefined;
  samples: RigSamples;
}

/** Every actuator of the rig between its approved limits. The heartbeat belongs to the host and is left out. */
export function ActuatorPanel({ rig, status, envelope, samples }: ActuatorPanelProps) {
  const obstacle = moveObstacle(status, useObstacle('rig.move'));
  const actuators = rig.channels.filter(
    ({ kind, id }) => kind === 'actuator' && id !== envelope?.heartbeat?.channel,
  );
  return (
    <Panel title="Actuators" isFlush>
      <Box sx={{ px: 1.5, pt: 1, fontSize: '0.75rem', color: 'text.secondary' }}>
        ▼ read back · △ written · ┆ rest
      </Box>
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none' }}>
        {actuators.map((channel) => (
          <ActuatorRow
            key={channel.id}
            rigId={rig.id}
            channel={channel}
            limit={envelope?.limits.find((limit) => limit.channel === channel.id)}
            samples={samples}
            moveObstacle={obstacle}
          />
        ))}
      </Box>
    </Panel>
  );
}
