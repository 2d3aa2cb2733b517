import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { useDraft, useDraftList } from './draft-context.js';
import { DraftField } from './draft-field.js';
import { textAt, valueAt } from './draft-values.js';

/** What is watched beside the interlocks: freshness of sensors, heartbeat, overruns, silence of the server. */
export function WatchEditor() {
  const { value, isReadOnly } = useDraft();
  const hasHeartbeat = valueAt(value, ['heartbeat']) !== null;
  const grid = {
    display: 'grid',
    gap: 1.5,
    gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 14rem), 1fr))',
  };
  return (
    <Box sx={{ display: 'grid', gap: 1.5 }}>
      <Box sx={grid}>
        <DraftField path={['overrunLimit']} label="Overruns in a row that trip" isLabelShown isNumber />
        <DraftField path={['serverSilenceS']} label="Server silent for" unit="s" isLabelShown isNumber />
        {hasHeartbeat && <HeartbeatFields />}
      </Box>
      {!isReadOnly && <HeartbeatSwitch hasHeartbeat={hasHeartbeat} />}
      <Staleness />
    </Box>
  );
}

function HeartbeatFields() {
  const { rig } = useDraft();
  const actuators = rig.channels.filter(({ kind }) => kind === 'actuator');
  const options = actuators.map(({ id, title }) => ({ value: id, label: title }));
  return (
    <>
      <DraftField path={['heartbeat', 'channel']} label="Heartbeat channel" options={options} isLabelShown />
      <DraftField path={['heartbeat', 'periodS']} label="Heartbeat every" unit="s" isLabelShown isNumber />
    </>
  );
}

function HeartbeatSwitch({ hasHeartbeat }: { hasHeartbeat: boolean }) {
  const { rig, setValue } = useDraft();
  const first = rig.channels.find(({ kind }) => kind === 'actuator')?.id ?? '';
  return (
    <Box>
      <Button onClick={() => setValue(['heartbeat'], hasHeartbeat ? null : { channel: first, periodS: 0.5 })}>
        {hasHeartbeat ? 'Remove heartbeat' : 'Add heartbeat'}
      </Button>
    </Box>
  );
}

function Staleness() {
  const { rig, value, isReadOnly } = useDraft();
  const { rows, add, remove } = useDraftList('staleness');
  const watched = new Set(rows.map((row) => valueAt(row, ['channel'])));
  const free = rig.channels.filter(({ id, kind }) => kind === 'sensor' && !watched.has(id));
  const titleAt = (index: number) => {
    const id = textAt(value, ['staleness', index, 'channel']);
    return rig.channels.find((channel) => channel.id === id)?.title ?? String(id);
  };
  return (
    <Box sx={{ display: 'grid', gap: 1.5 }}>
      <Box component="h3" sx={{ m: 0, fontSize: '0.8125rem' }}>
        Sensors that must be fresh
      </Box>
      {rows.length === 0 && <Box sx={{ color: 'text.secondary' }}>None.</Box>}
      <Box
        sx={{
          display: 'grid',
          gap: 1.5,
          gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 18rem), 1fr))',
        }}
      >
        {rows.map((_, index) => (
          <Box key={index} sx={{ display: 'flex', gap: 1, alignItems: 'flex-start' }}>
            <DraftField
              path={['staleness', index, 'afterS']}
              label={`${titleAt(index)}, at most`}
              unit="s old"
              isLabelShown
              isNumber
            />
            {!isReadOnly && (
              <Button
                sx={{ minHeight: 40 }}
                onClick={() => remove(index)}
                aria-label={`Remove the watch on ${titleAt(index)}`}
              >
                Remove
              </Button>
            )}
          </Box>
        ))}
      </Box>
      {!isReadOnly && (
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
          {free.map(({ id, title }) => (
            <Button key={id} onClick={() => add({ channel: id, afterS: 1 })}>
              Watch {title}
            </Button>
          ))}
        </Box>
      )}
    </Box>
  );
}
