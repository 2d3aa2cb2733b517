import { useState } from 'react';
import Box from '@mui/material/Box';
import TextField from '@mui/material/TextField';
import type { Connection } from '@cresthold/shared';
import type { DraftFaults } from '../draft/draft-faults.js';
import type { WiringDraft } from '../draft/use-wiring-draft.js';

interface WireProps {
  index: number;
  connection: Connection;
  wiring: WiringDraft;
  isReadOnly: boolean;
}

interface NameFieldsProps extends WireProps {
  faults: DraftFaults;
  /** Path of the connection in the draft. */
  root: string;
}

/** What a connection is called. */
export function NameFields({ index, connection, faults, wiring, isReadOnly, root }: NameFieldsProps) {
  return (
    <Box
      sx={{
        display: 'grid',
        gap: 2,
        gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 15rem), 1fr))',
      }}
    >
      <IdField {...{ index, connection, wiring, isReadOnly }} fault={faults.at(`${root}.id`)} />
      <TextField
        label="Title"
        required
        value={connection.title}
        disabled={isReadOnly}
        onChange={({ target }) =>
          wiring.setConnection(index, (one) => ({ ...one, title: target.value }), `${root} title`)
        }
        error={faults.at(`${root}.title`) !== undefined}
        helperText={faults.at(`${root}.title`)}
        slotProps={{ htmlInput: { autoComplete: 'off', spellCheck: false } }}
      />
    </Box>
  );
}

interface IdFieldProps extends WireProps {
  fault: string | undefined;
}

/** Taken when the field is left: half of an id might be that of another connection, and its channels with it. */
function IdField({ index, connection, wiring, isReadOnly, fault }: IdFieldProps) {
  const [typed, setTyped] = useState<string | null>(null);
  const text = typed ?? connection.id;
  const isTaken = wiring.draft.connections.some(({ id }, at) => at !== index && id === text.trim());
  const take = () => {
    if (isTaken) return;
    setTyped(null);
    if (text.trim() !== connection.id) renameConnection(wiring, index, text.trim());
  };
  const shown = isTaken ? 'Another connection has this id: give one of its own.' : fault;
  return (
    <TextField
      label="Id"
      required
      value={text}
      disabled={isReadOnly}
      onChange={(event) => setTyped(event.target.value)}
      onBlur={take}
      onKeyDown={(event) => event.key === 'Enter' && take()}
      error={shown !== undefined}
      helperText={shown}
      slotProps={{ htmlInput: { autoComplete: 'off', spellCheck: false } }}
    />
  );
}

/** Channels stay on the wire whatever it is called. */
function renameConnection(wiring: WiringDraft, index: number, id: string): void {
  wiring.change((draft) => {
    const before = draft.connections[index]?.id;
    return {
      ...draft,
      connections: draft.connections.map((one, at) => (at === index ? { ...one, id } : one)),
      rows: draft.rows.map((row) => (row['connection'] === before ? { ...row, connection: id } : row)),
    };
  });
}
