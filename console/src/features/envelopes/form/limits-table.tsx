import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { limitFields, unitOf } from '../envelope-fields.js';
import { firstLimit } from '../first-envelope.js';
import { useDraft, useDraftList } from './draft-context.js';
import { DraftField } from './draft-field.js';
import { textAt, valueAt } from './draft-values.js';
import { ResponsiveTable } from './responsive-table.js';

/** The limits of every actuator: a table, on a narrow screen a card for each. */
export function LimitsTable() {
  const { rig, value, isReadOnly, faultAt } = useDraft();
  const { rows, add, remove } = useDraftList('limits');
  const channelOf = (index: number) =>
    rig.channels.find(({ id }) => id === valueAt(value, ['limits', index, 'channel']));
  const limited = new Set(rows.map((row) => valueAt(row, ['channel'])));
  const free = rig.channels.filter(
    ({ id, kind }) =>
      kind === 'actuator' && !limited.has(id) && id !== valueAt(value, ['heartbeat', 'channel']),
  );
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <ResponsiveTable
        label="Actuator limits"
        minWidthPx={isReadOnly ? 900 : 1320}
        heads={['Actuator', ...limitFields.map(({ label }) => label), ...(isReadOnly ? [] : ['Remove'])]}
        rows={rows.map((_, index) => {
          const channel = channelOf(index);
          const title = channel?.title ?? textAt(value, ['limits', index, 'channel']);
          const cells = limitFields.map((field) => (
            <DraftField
              key={field.key}
              path={['limits', index, field.key]}
              label={`${field.label} of ${title}`}
              unit={unitOf(field, channel?.unit ?? '')}
              options={field.options}
              isNumber={!field.options}
            />
          ));
          const fault = faultAt(['limits', index, 'channel']);
          const head = <RowHead key="head" title={title} fault={fault} />;
          const takeAway = (
            <Button key="remove" onClick={() => remove(index)} aria-label={`Remove the limit of ${title}`}>
              Remove
            </Button>
          );
          return isReadOnly ? [head, ...cells] : [head, ...cells, takeAway];
        })}
      />
      {faultAt(['limits']) !== undefined && (
        <Box role="alert" sx={{ color: 'paper.warn' }}>
          {faultAt(['limits'])}
        </Box>
      )}
      {!isReadOnly && (
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
          {free.map((channel) => (
            <Button key={channel.id} onClick={() => add(firstLimit(channel))}>
              Add limit for {channel.title}
            </Button>
          ))}
        </Box>
      )}
    </Box>
  );
}

function RowHead({ title, fault }: { title: string; fault: string | undefined }) {
  return (
    <>
      <strong>{title}</strong>
      {fault !== undefined && <Box sx={{ fontSize: '0.75rem', color: 'paper.warn' }}>{fault}</Box>}
    </>
  );
}
