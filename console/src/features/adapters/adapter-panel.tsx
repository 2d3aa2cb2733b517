import Box from '@mui/material/Box';
import type { AdapterDocument } from '../../api/index.js';
import { Panel } from '../../components/index.js';
import { fieldsOf, type JsonSchema, type SchemaField } from '../../components/schema-form/index.js';

/** One adapter: where it comes from, whether it can be used, and what it must be told. */
export function AdapterPanel({ adapter }: { adapter: AdapterDocument }) {
  return (
    <Panel title={adapter.title} actions={<StateMark state={adapter.state} />}>
      <Facts adapter={adapter} />
      {adapter.error && <Reason error={adapter.error} />}
      {adapter.configurationSchema && (
        <Fields title="A connection must be told" schema={adapter.configurationSchema} />
      )}
      {adapter.addressSchema && <Fields title="A channel must be told" schema={adapter.addressSchema} />}
    </Panel>
  );
}

function StateMark({ state }: { state: AdapterDocument['state'] }) {
  if (state === 'ready') return <span>ready</span>;
  return (
    <Box component="span" sx={{ color: 'paper.warn', fontWeight: 700 }}>
      ✕ broken
    </Box>
  );
}

function Facts({ adapter }: { adapter: AdapterDocument }) {
  const facts = [
    ['Id', adapter.id ?? 'not told'],
    ['Version', adapter.version ?? 'not told'],
    ['Contract', adapter.contract ?? 'not told'],
    ['From', adapter.reference ?? 'ships with Cresthold'],
  ];
  return (
    <Box
      component="dl"
      sx={{
        m: 0,
        display: 'grid',
        gridTemplateColumns: 'max-content minmax(0, 1fr)',
        columnGap: 2,
        fontSize: '0.8125rem',
        '& dt': { color: 'text.secondary' },
        '& dd': { m: 0, overflowWrap: 'anywhere' },
      }}
    >
      {facts.map(([name, value]) => (
        <Box key={name} sx={{ display: 'contents' }}>
          <dt>{name}</dt>
          <dd>{value}</dd>
        </Box>
      ))}
    </Box>
  );
}

function Reason({ error }: { error: NonNullable<AdapterDocument['error']> }) {
  return (
    <Box sx={{ mt: 1, color: 'paper.warn', fontSize: '0.8125rem', overflowWrap: 'anywhere' }}>
      <strong>{error.code}</strong>: {error.message}
    </Box>
  );
}

function Fields({ title, schema }: { title: string; schema: JsonSchema }) {
  return (
    <Box component="details" sx={{ mt: 1, fontSize: '0.8125rem' }}>
      <Box component="summary" sx={{ cursor: 'pointer' }}>
        {title}
      </Box>
      <Box component="ul" sx={{ m: 0, mt: 0.5, pl: 2.5, display: 'grid', gap: 0.25 }}>
        {fieldsOf(schema).map((field) => (
          <li key={field.name}>
            <strong>{field.label}</strong> ({[field.name, typeText(field), ...needText(field)].join(', ')})
            {field.help !== '' && <>: {field.help}</>}
          </li>
        ))}
      </Box>
    </Box>
  );
}

const kindTexts: Record<SchemaField['kind'], string> = {
  text: 'text',
  number: 'number',
  switch: 'yes or no',
  choice: 'choice',
  group: 'group of fields',
  list: 'list',
  table: 'table',
  json: 'JSON',
};

function typeText(field: SchemaField): string {
  return field.kind === 'choice' ? field.options.map(String).join(' | ') : kindTexts[field.kind];
}

function needText({ isRequired, schema }: SchemaField): string[] {
  if (isRequired) return ['needed'];
  return schema.default === undefined ? [] : [`else ${JSON.stringify(schema.default)}`];
}
