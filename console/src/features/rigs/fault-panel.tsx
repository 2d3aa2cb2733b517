import { useState } from 'react';
import Box from '@mui/material/Box';
import TextField from '@mui/material/TextField';
import { wireFaultForms, type Rig, type RigStatus } from '@cresthold/shared';
import { asProblem } from '../../api/index.js';
import { GatedButton, Panel, ProblemNotice } from '../../components/index.js';
import {
  initialValue,
  SchemaForm,
  schemaFaults,
  type FormValue,
} from '../../components/schema-form/index.js';
import { useObstacle } from '../auth/index.js';
import { useInjectFault } from './api/rig-commands.js';
import { InjectedFaultNotice } from './injected-fault-notice.js';

const firstForm = wireFaultForms[0];

/** Makes the wires of a bench fail on purpose, to see what rig and experiment make of it. On benches only. */
export function FaultPanel({ rig, status }: { rig: Rig; status: RigStatus | null }) {
  const [connection, setConnection] = useState(rig.connections[0]?.id ?? '');
  const injected = status?.connections.find(({ id }) => id === connection)?.injectedFault ?? null;
  return (
    <Panel title="Faults on this bench">
      <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary', mb: 1.5 }}>
        Makes a connection fail on purpose. Interlocks trip and runs end as they would on a machine. A fault
        ends when it is taken off, or when the rig host starts again.
      </Box>
      <Choice
        label="Connection"
        value={connection}
        onChange={setConnection}
        options={rig.connections.map(({ id, title }) => ({ value: id, label: title }))}
      />
      {injected && (
        <Box sx={{ mt: 1 }}>
          <InjectedFaultNotice injected={injected} />
        </Box>
      )}
      <FaultForm key={connection} rig={rig} connection={connection} hasFault={injected !== null} />
    </Panel>
  );
}

interface FaultFormProps {
  rig: Rig;
  connection: string;
  hasFault: boolean;
}

function FaultForm({ rig, connection, hasFault }: FaultFormProps) {
  const obstacle = useObstacle('rig.inject-fault');
  const inject = useInjectFault(rig.id, connection);
  const [form, setForm] = useState(firstForm);
  const [value, setValue] = useState<FormValue>(() => (firstForm ? initialValue(firstForm.schema) : {}));
  const [channel, setChannel] = useState('');
  const [isChecked, setChecked] = useState(false);
  if (!form) return null;
  const choose = (kind: string) => {
    const chosen = wireFaultForms.find((candidate) => candidate.kind === kind) ?? form;
    setForm(chosen);
    // What both kinds ask for stays as it was typed.
    const kept = Object.entries(value).filter(([name]) => name in chosen.schema.properties);
    setValue({ ...initialValue(chosen.schema), ...Object.fromEntries(kept) });
    setChecked(false);
  };
  const put = () => {
    setChecked(true);
    if (schemaFaults(form.schema, value).length > 0) return;
    inject.mutate({ kind: form.kind, ...value, channels: channel === '' ? null : [channel] });
  };
  const channels = rig.channels.filter((one) => one.kind !== 'derived' && one.connection === connection);
  const problem = inject.error === null ? null : asProblem(inject.error);
  return (
    <Box sx={{ display: 'grid', gap: 2, mt: 2 }}>
      <Choice
        label="Fault"
        value={form.kind}
        onChange={choose}
        help={form.help}
        options={wireFaultForms.map(({ kind, title }) => ({ value: kind, label: title }))}
      />
      <Choice
        label="Channels"
        value={channel}
        onChange={setChannel}
        options={[
          { value: '', label: 'all' },
          ...channels.map(({ id, title }) => ({ value: id, label: title })),
        ]}
      />
      <SchemaForm
        schema={form.schema}
        value={value}
        onChange={setValue}
        root="fault"
        faults={problem?.fields}
        isChecked={isChecked}
      />
      <Box sx={{ display: 'flex', gap: 1, flexWrap: 'wrap' }}>
        <GatedButton variant="outlined" obstacle={obstacle} isBusy={inject.isPending} onClick={put}>
          Put fault on
        </GatedButton>
        {hasFault && (
          <GatedButton obstacle={obstacle} isBusy={inject.isPending} onClick={() => inject.mutate(null)}>
            Take fault off
          </GatedButton>
        )}
      </Box>
      {problem && <ProblemNotice title="The fault was not changed" error={problem} />}
    </Box>
  );
}

interface ChoiceProps {
  label: string;
  value: string;
  onChange: (value: string) => void;
  options: readonly { value: string; label: string }[];
  help?: string;
}

function Choice({ label, value, onChange, options, help }: ChoiceProps) {
  return (
    <TextField
      select
      fullWidth
      label={label}
      value={value}
      onChange={({ target }) => onChange(target.value)}
      helperText={help}
      slotProps={{ select: { native: true }, inputLabel: { shrink: true } }}
    >
      {options.map((option) => (
        <option key={option.value} value={option.value}>
          {option.label}
        </option>
      ))}
    </TextField>
  );
}
