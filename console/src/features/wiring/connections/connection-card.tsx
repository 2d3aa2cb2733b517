import type { ReactNode } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { Connection, RigStatus } from '@cresthold/shared';
import type { AdapterDocument } from '../../../api/index.js';
import { SchemaForm, type FormValue } from '../../../components/schema-form/index.js';
import type { DraftFaults } from '../draft/draft-faults.js';
import type { WiringDraft } from '../draft/use-wiring-draft.js';
import { NameFields } from './name-fields.js';
import { SerialPortChoice } from './serial-port-choice.js';

interface ConnectionCardProps {
  index: number;
  connection: Connection;
  adapters: readonly AdapterDocument[];
  faults: DraftFaults;
  isTried: boolean;
  state: RigStatus['connections'][number] | undefined;
  /** Channels that it carries. */
  channels: number;
  wiring: WiringDraft;
  isReadOnly: boolean;
  /** Null where there is no room for another. */
  onDuplicate: (() => void) | null;
}

/** One connection: what it is called, and what its adapter must be told. */
export function ConnectionCard(props: ConnectionCardProps) {
  const { index, connection, adapters, faults, isTried, state, channels, wiring, isReadOnly, onDuplicate } =
    props;
  const root = `connections[${index}]`;
  const schema = adapters.find(({ id }) => id === connection.adapter)?.configurationSchema ?? null;
  const configuration = connection.configuration as FormValue;
  const configure = (value: FormValue) =>
    wiring.setConnection(index, (one) => ({ ...one, configuration: value }), `${root} configuration`);
  const name = connection.title || connection.id;
  return (
    <Box component="fieldset" sx={{ m: 0, p: 1.5, border: 1, borderColor: 'divider', minWidth: 0 }}>
      <Box component="legend" sx={{ px: 0.5, fontSize: '0.8125rem', fontWeight: 700 }}>
        {name} · {connection.adapter}
      </Box>
      <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: 'minmax(0, 1fr)' }}>
        <CardHead state={state} channels={channels}>
          {!isReadOnly && (
            <Box sx={{ display: 'flex', gap: 1 }}>
              <Button
                disabled={onDuplicate === null}
                aria-label={`Duplicate connection ${name}`}
                onClick={onDuplicate ?? undefined}
              >
                Duplicate
              </Button>
              <Button
                aria-label={`Remove connection ${name}`}
                onClick={() => removeConnection(wiring, index)}
              >
                Remove
              </Button>
            </Box>
          )}
        </CardHead>
        <NameFields {...{ index, connection, faults, wiring, isReadOnly, root }} />
        {!isReadOnly && schema?.['properties'] !== undefined && hasSerialPath(schema) && (
          <SerialPortChoice
            path={configuration['path']}
            onPath={(path) => configure({ ...configuration, path })}
          />
        )}
        {schema ? (
          <SchemaForm
            schema={schema}
            value={configuration}
            onChange={configure}
            root={`${root}.configuration`}
            faults={shownFaults(faults, `${root}.configuration`, configuration, isTried)}
            isChecked={isTried}
            isReadOnly={isReadOnly}
          />
        ) : (
          <Box sx={{ color: 'paper.warn' }}>
            {faults.at(`${root}.adapter`) ?? `Adapter "${connection.adapter}" is not installed, or broken.`}
          </Box>
        )}
      </Box>
    </Box>
  );
}

function CardHead({
  state,
  channels,
  children,
}: Pick<ConnectionCardProps, 'state' | 'channels'> & { children: ReactNode }) {
  return (
    <Box
      sx={{
        display: 'flex',
        gap: 1,
        flexWrap: 'wrap',
        justifyContent: 'space-between',
        fontSize: '0.8125rem',
      }}
    >
      <span>
        {channels === 1 ? 'one channel' : `${channels} channels`}
        {state && ', '}
        {state?.isConnected === true && 'connected'}
        {state?.isConnected === false && (
          <Box component="span" sx={{ color: 'paper.warn' }}>
            ✕ not connected: {state.error}
          </Box>
        )}
      </span>
      {children}
    </Box>
  );
}

function removeConnection(wiring: WiringDraft, index: number): void {
  wiring.change((draft) => ({ ...draft, connections: draft.connections.toSpliced(index, 1) }));
}

/** What is only missing is not told before saving was tried. */
function shownFaults(faults: DraftFaults, root: string, value: FormValue, isTried: boolean) {
  return faults
    .below(root)
    .filter(({ field }) => isTried || field.includes('.') || value[field] !== undefined)
    .map(({ field, message }) => ({ field: `${root}.${field}`, message }));
}

/** Adapters on serial lines ask for the path of a port. */
function hasSerialPath(schema: Record<string, unknown>): boolean {
  const properties = schema['properties'];
  return (
    typeof properties === 'object' && properties !== null && 'path' in properties && 'baudRate' in properties
  );
}
