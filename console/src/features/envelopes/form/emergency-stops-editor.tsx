import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { emergencyStopFields } from '../envelope-fields.js';
import { useDraft, useDraftList } from './draft-context.js';
import { DraftField } from './draft-field.js';
import { textAt, valueAt } from './draft-values.js';

/** Sensors that follow a hard-wired emergency stop, so that the software stops with it and says why. */
export function EmergencyStopsEditor() {
  const { rig, value, isReadOnly } = useDraft();
  const { rows, add, remove } = useDraftList('emergencyStopInputs');
  const used = new Set(rows.map((row) => valueAt(row, ['channel'])));
  const free = rig.channels.filter(({ id, kind }) => kind === 'sensor' && !used.has(id));
  const titleAt = (index: number) => {
    const id = textAt(value, ['emergencyStopInputs', index, 'channel']);
    return rig.channels.find((channel) => channel.id === id)?.title ?? id;
  };
  return (
    <Box sx={{ display: 'grid', gap: 1.5 }}>
      <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
        These inputs only watch a hard-wired emergency stop: this software stops with it and says why. The
        stop itself must work without this software.
      </Box>
      {rows.length === 0 && <Box sx={{ color: 'text.secondary' }}>None.</Box>}
      {rows.map((_, index) => (
        <Box
          key={index}
          sx={{
            display: 'grid',
            gap: 1.5,
            alignItems: 'start',
            gridTemplateColumns: { xs: 'minmax(0, 1fr)', md: '12rem repeat(2, minmax(0, 1fr)) auto' },
          }}
        >
          <strong>{titleAt(index)}</strong>
          {emergencyStopFields.map(({ key, ...field }) => (
            <DraftField key={key} path={['emergencyStopInputs', index, key]} isLabelShown {...field} />
          ))}
          {!isReadOnly && (
            <Button
              sx={{ minHeight: 40 }}
              onClick={() => remove(index)}
              aria-label={`Remove the emergency-stop input ${titleAt(index)}`}
            >
              Remove
            </Button>
          )}
        </Box>
      ))}
      {!isReadOnly && (
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
          {free.map(({ id, title }) => (
            <Button key={id} onClick={() => add({ channel: id, title, pressedWhen: 'zero' })}>
              {title} is an emergency-stop input
            </Button>
          ))}
        </Box>
      )}
    </Box>
  );
}
