import Box from '@mui/material/Box';
import FormControlLabel from '@mui/material/FormControlLabel';
import Switch from '@mui/material/Switch';
import TextField from '@mui/material/TextField';
import { Panel } from '../../components/index.js';
import type { DraftFaults } from './draft/draft-faults.js';
import type { RigDraft } from './draft/rig-draft.js';
import type { WiringDraft } from './draft/use-wiring-draft.js';

interface RigFieldsProps {
  wiring: WiringDraft;
  faults: DraftFaults;
  /** The id of a rig that is there never changes. */
  isNew: boolean;
  isReadOnly: boolean;
}

const fields: readonly { key: 'id' | 'title' | 'periodMs' | 'description'; label: string; help: string }[] = [
  {
    key: 'id',
    label: 'Id of the rig',
    help: 'Lower-case letters, digits and hyphens, e.g. burner-2; it never changes.',
  },
  { key: 'title', label: 'Title of the rig', help: 'What people call it.' },
  { key: 'periodMs', label: 'Period, ms', help: 'Time between two scans, 1 to 10 000.' },
  { key: 'description', label: 'Description', help: 'What it is, where it stands.' },
];

/** What the rig is called and how often it is scanned. */
export function RigFields({ wiring, faults, isNew, isReadOnly }: RigFieldsProps) {
  const { draft, change } = wiring;
  const set = (key: keyof RigDraft, value: string | boolean) =>
    change((before) => ({ ...before, [key]: value }), `rig ${key}`);
  return (
    <Panel title="Rig">
      <Box
        sx={{
          display: 'grid',
          gap: 2,
          gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 15rem), 1fr))',
        }}
      >
        {fields.map(({ key, label, help }) => {
          const fault = faults.at(key);
          return (
            <TextField
              key={key}
              label={label}
              required={key !== 'description'}
              value={draft[key]}
              disabled={isReadOnly || (key === 'id' && !isNew)}
              onChange={(event) => set(key, event.target.value)}
              error={fault !== undefined}
              helperText={fault ?? help}
              slotProps={{
                htmlInput: {
                  autoComplete: 'off',
                  spellCheck: false,
                  inputMode: key === 'periodMs' ? 'decimal' : undefined,
                },
              }}
            />
          );
        })}
        <Box>
          <FormControlLabel
            label="Bench: a simulation is behind its wires"
            control={
              <Switch
                checked={draft.isBench}
                disabled={isReadOnly}
                onChange={(_event, isOn) => set('isBench', isOn)}
              />
            }
          />
          <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
            Faults may be put on a bench on purpose. Never set it for a machine.
          </Box>
        </Box>
      </Box>
    </Panel>
  );
}
