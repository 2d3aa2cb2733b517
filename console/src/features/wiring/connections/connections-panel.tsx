import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import type { Connection, RigStatus } from '@cresthold/shared';
import type { AdapterDocument } from '../../../api/index.js';
import { Empty, Panel } from '../../../components/index.js';
import { initialValue } from '../../../components/schema-form/index.js';
import type { DraftFaults } from '../draft/draft-faults.js';
import { freeId } from '../draft/rig-draft.js';
import type { WiringDraft } from '../draft/use-wiring-draft.js';
import { ConnectionCard } from './connection-card.js';

const connectionsMax = 16;

interface ConnectionsPanelProps {
  wiring: WiringDraft;
  adapters: readonly AdapterDocument[];
  faults: DraftFaults;
  isTried: boolean;
  status: RigStatus | null;
  isReadOnly: boolean;
}

/** The wires of the rig, each with the form that its adapter asks for. */
export function ConnectionsPanel(props: ConnectionsPanelProps) {
  const { wiring, adapters, faults, isTried, status, isReadOnly } = props;
  const { connections, rows } = wiring.draft;
  const ready = adapters.filter(({ state, id }) => state === 'ready' && id !== null);
  const add = (connection: Connection, at = connections.length) =>
    wiring.change((draft) => ({ ...draft, connections: draft.connections.toSpliced(at, 0, connection) }));
  const duplicate = (connection: Connection, at: number) => {
    const id = freeId(
      connection.id || 'wire',
      connections.map((one) => one.id),
    );
    add({ ...connection, id }, at + 1);
  };
  return (
    <Panel title={`Connections (${connections.length})`}>
      <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: 'minmax(0, 1fr)' }}>
        {connections.length === 0 && (
          <Empty title="No connection yet">One wire to the rig each: a serial port, a Modbus endpoint.</Empty>
        )}
        {connections.map((connection, index) => (
          <ConnectionCard
            key={index}
            index={index}
            connection={connection}
            adapters={ready}
            faults={faults}
            isTried={isTried}
            state={status?.connections.find(({ id }) => id === connection.id)}
            channels={rows.filter((row) => row['connection'] === connection.id).length}
            wiring={wiring}
            isReadOnly={isReadOnly}
            onDuplicate={connections.length < connectionsMax ? () => duplicate(connection, index) : null}
          />
        ))}
        {faults.at('connections') !== undefined && (
          <Box sx={{ color: 'paper.warn' }}>{faults.at('connections')}</Box>
        )}
        {!isReadOnly && connections.length < connectionsMax && (
          <AddConnection adapters={ready} taken={connections.map(({ id }) => id)} onAdd={add} />
        )}
      </Box>
    </Panel>
  );
}

interface AddConnectionProps {
  adapters: readonly AdapterDocument[];
  taken: readonly string[];
  onAdd: (connection: Connection) => void;
}

function AddConnection({ adapters, taken, onAdd }: AddConnectionProps) {
  const [chosen, setChosen] = useState('');
  const adapter = adapters.find(({ id }) => id === chosen) ?? adapters[0];
  const add = () => {
    if (!adapter?.id) return;
    const { id, title, configurationSchema } = adapter;
    onAdd({
      id: freeId(id, taken),
      title,
      adapter: id,
      configuration: configurationSchema ? initialValue(configurationSchema) : {},
    });
  };
  return (
    <Box sx={{ display: 'flex', gap: 1, flexWrap: 'wrap', alignItems: 'center' }}>
      <TextField
        select
        label="Adapter"
        value={adapter?.id ?? ''}
        onChange={(event) => setChosen(event.target.value)}
        slotProps={{ select: { native: true }, inputLabel: { shrink: true } }}
        sx={{ minWidth: '14rem', maxWidth: '100%' }}
      >
        {adapters.map(({ id, title }) => (
          <option key={id} value={id ?? ''}>
            {title}
          </option>
        ))}
      </TextField>
      <Button disabled={!adapter} onClick={add}>
        Add connection
      </Button>
    </Box>
  );
}
