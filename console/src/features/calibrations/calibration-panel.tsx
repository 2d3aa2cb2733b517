import { useState } from 'react';
import Box from '@mui/material/Box';
import TextField from '@mui/material/TextField';
import type { Channel, Rig, RigPhase } from '@cresthold/shared';
import type { CalibrationDocument } from '../../api/index.js';
import { Empty, GatedButton, Loading, Panel, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { useCalibrations } from './api/calibrations.js';
import { CalibrationDialog } from './calibration-dialog.js';
import { CalibrationRow } from './calibration-row.js';

interface CalibrationPanelProps {
  /** As it is saved: only saved sensors are calibrated. */
  rig: Rig;
  phase: RigPhase;
}

/** Calibrations of the rig's sensors: entered, seen, withdrawn. */
export function CalibrationPanel({ rig, phase }: CalibrationPanelProps) {
  const calibrations = useCalibrations(rig.id);
  const roleObstacle = useObstacle('calibration.edit');
  const [channelId, setChannelId] = useState<string | null>(null);
  const sensors = rig.channels.filter(({ kind }) => kind === 'sensor');
  const channel = sensors.find(({ id }) => id === channelId);
  const isAtRest = ['idle', 'offline', 'tripped'].includes(phase);
  const obstacle = roleObstacle ?? (isAtRest ? null : `The rig is ${phase}: disarm it or end its run first.`);
  return (
    <Panel title="Calibration">
      {calibrations.isPending && <Loading what="calibrations" />}
      {calibrations.error !== null && (
        <ProblemNotice
          title="The calibrations could not be loaded"
          error={calibrations.error}
          onRetry={() => void calibrations.refetch()}
        />
      )}
      {calibrations.data && (
        <Box sx={{ display: 'grid', gap: 1.5, gridTemplateColumns: 'minmax(0, 1fr)' }}>
          <List {...{ all: calibrations.data, sensors, obstacle }} onCalibrate={setChannelId} />
          <ChooseSensor sensors={sensors} obstacle={obstacle} onChoose={setChannelId} />
        </Box>
      )}
      {channel && <CalibrationDialog rig={rig} channel={channel} onClose={() => setChannelId(null)} />}
    </Panel>
  );
}

interface ListProps {
  all: readonly CalibrationDocument[];
  sensors: readonly Channel[];
  obstacle: string | null;
  onCalibrate: (channel: string) => void;
}

function List({ all, sensors, obstacle, onCalibrate }: ListProps) {
  const inForce = all.filter(({ status }) => status === 'in-force');
  const titleOf = (id: string) => sensors.find((sensor) => sensor.id === id)?.title ?? id;
  if (inForce.length === 0) {
    return <Empty title="No sensor is calibrated">Each is taken as its adapter gives it.</Empty>;
  }
  return (
    <Box component="ul" aria-label="Calibrations in force" sx={{ m: 0, p: 0, listStyle: 'none' }}>
      {inForce.map((calibration) => (
        <CalibrationRow
          key={calibration.id}
          title={titleOf(calibration.channel)}
          calibration={calibration}
          history={all.filter(({ id, channel }) => channel === calibration.channel && id !== calibration.id)}
          obstacle={obstacle}
          onCalibrate={() => onCalibrate(calibration.channel)}
        />
      ))}
    </Box>
  );
}

interface ChooseSensorProps {
  sensors: readonly Channel[];
  obstacle: string | null;
  onChoose: (channel: string) => void;
}

function ChooseSensor({ sensors, obstacle, onChoose }: ChooseSensorProps) {
  const [chosen, setChosen] = useState('');
  const sensor = sensors.find(({ id }) => id === chosen) ?? sensors[0];
  if (!sensor) return null;
  return (
    <Box sx={{ display: 'flex', gap: 1, flexWrap: 'wrap', alignItems: 'flex-start' }}>
      <TextField
        select
        label="Sensor"
        value={sensor.id}
        onChange={(event) => setChosen(event.target.value)}
        slotProps={{ select: { native: true }, inputLabel: { shrink: true } }}
        sx={{ minWidth: '14rem', maxWidth: '100%' }}
      >
        {sensors.map(({ id, title }) => (
          <option key={id} value={id}>
            {title}
          </option>
        ))}
      </TextField>
      <GatedButton obstacle={obstacle} onClick={() => onChoose(sensor.id)}>
        Calibrate …
      </GatedButton>
    </Box>
  );
}
