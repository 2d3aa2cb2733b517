import { useState, type ReactNode } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import FormControlLabel from '@mui/material/FormControlLabel';
import FormHelperText from '@mui/material/FormHelperText';
import Switch from '@mui/material/Switch';
import TextField from '@mui/material/TextField';
import { asList, asObject, emptyItem, initialValue, withProperty, type FormValue } from './field-value.js';
import { useFormContext, type FieldProps } from './form-context.js';
import type { FieldOf, SchemaField } from './schema-field.js';
import { pathOf } from './schema-faults.js';
import { ChoiceField, JsonField, SwitchField, TypedField } from './single-fields.js';

interface FieldGroupProps {
  fields: readonly SchemaField[];
  path: string;
  value: FormValue;
  onChange: (value: FormValue) => void;
}

/** The fields of one object, side by side where there is room. */
export function FieldGroup({ fields, path, value, onChange }: FieldGroupProps) {
  return (
    <Box
      sx={{
        display: 'grid',
        gap: 2,
        gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 15rem), 1fr))',
        alignItems: 'start',
      }}
    >
      {fields.map((field) => (
        <FieldByKind
          key={field.name}
          field={field}
          path={pathOf(path, field.name)}
          value={value[field.name]}
          onChange={(property) => onChange(withProperty(value, field.name, property))}
        />
      ))}
    </Box>
  );
}

/** One field, drawn by its kind. */
export function FieldByKind({ field, ...props }: FieldProps<SchemaField>) {
  switch (field.kind) {
    case 'text':
    case 'number':
      return <TypedField field={field} {...props} />;
    case 'choice':
      return <ChoiceField field={field} {...props} />;
    case 'switch':
      return <SwitchField field={field} {...props} />;
    case 'json':
      return <JsonField field={field} {...props} />;
    case 'group':
      return <GroupField field={field} {...props} />;
    case 'list':
      return <ListField field={field} {...props} />;
    case 'table':
      return <TableField field={field} {...props} />;
  }
}

/** A frame around fields that belong together, across the whole form. */
function Frame({ field, path, children }: { field: SchemaField; path: string; children: ReactNode }) {
  const fault = useFormContext().faultAt(path);
  return (
    <Box
      component="fieldset"
      sx={{ m: 0, p: 1.5, border: 1, borderColor: 'divider', minWidth: 0, gridColumn: '1 / -1' }}
    >
      <Box component="legend" sx={{ px: 0.5, fontSize: '0.8125rem' }}>
        {field.label}
      </Box>
      {(fault ?? field.help) !== '' && (
        <FormHelperText error={fault !== undefined} sx={{ mt: 0, mb: 1 }}>
          {fault ?? field.help}
        </FormHelperText>
      )}
      {children}
    </Box>
  );
}

/** An object within the object; one that may be left out has a switch. */
function GroupField({ field, path, value, onChange }: FieldProps<FieldOf<'group'>>) {
  const { isReadOnly } = useFormContext();
  const isThere = value !== undefined;
  const begin = () => initialValue(field.schema);
  return (
    <Frame field={field} path={path}>
      {!field.isRequired && (
        <FormControlLabel
          label={`Use ${field.label.toLowerCase()}`}
          control={
            <Switch
              checked={isThere}
              disabled={isReadOnly}
              onChange={(_event, isOn) => onChange(isOn ? begin() : undefined)}
            />
          }
        />
      )}
      {(isThere || field.isRequired) && (
        <FieldGroup fields={field.fields} path={path} value={asObject(value)} onChange={onChange} />
      )}
    </Frame>
  );
}

interface EntryProps {
  /** What "Remove" takes away, in words. */
  name: string;
  onRemove: () => void;
  children: ReactNode;
}

function Entry({ name, onRemove, children }: EntryProps) {
  const { isReadOnly } = useFormContext();
  return (
    <Box sx={{ display: 'flex', gap: 1, alignItems: 'flex-start', mb: 1.5 }}>
      <Box sx={{ flex: 1, minWidth: 0 }}>{children}</Box>
      {!isReadOnly && (
        <Button aria-label={`Remove ${name}`} onClick={onRemove}>
          Remove
        </Button>
      )}
    </Box>
  );
}

function ListField({ field, path, value, onChange }: FieldProps<FieldOf<'list'>>) {
  const { isReadOnly } = useFormContext();
  const items = asList(value);
  const { maxItems = Infinity } = field.schema;
  const nameOf = (index: number) => `${field.item.schema.title ?? field.label} ${index + 1}`;
  return (
    <Frame field={field} path={path}>
      {items.map((item, index) => (
        // Items have no identity of their own: their place is all that tells them apart.
        <Entry
          key={index}
          name={nameOf(index)}
          onRemove={() => onChange(items.filter((_, at) => at !== index))}
        >
          <FieldByKind
            field={{ ...field.item, label: nameOf(index) }}
            path={pathOf(path, index)}
            value={item}
            onChange={(next) => onChange(items.map((old, at) => (at === index ? (next ?? '') : old)))}
          />
        </Entry>
      ))}
      {!isReadOnly && items.length < maxItems && (
        <Button onClick={() => onChange([...items, emptyItem(field.item)])}>
          {`Add to ${field.label.toLowerCase()}`}
        </Button>
      )}
    </Frame>
  );
}

/** Names of one's own with a value each. */
function TableField({ field, path, value, onChange }: FieldProps<FieldOf<'table'>>) {
  const { isReadOnly } = useFormContext();
  const [name, setName] = useState('');
  const entries = asObject(value);
  const add = () => {
    onChange(withProperty(entries, name.trim(), emptyItem(field.value)));
    setName('');
  };
  return (
    <Frame field={field} path={path}>
      {Object.entries(entries).map(([key, item]) => (
        <Entry key={key} name={key} onRemove={() => onChange(withProperty(entries, key, undefined))}>
          <FieldByKind
            field={{ ...field.value, label: key }}
            path={pathOf(path, key)}
            value={item}
            onChange={(next) => onChange({ ...entries, [key]: next ?? '' })}
          />
        </Entry>
      ))}
      {!isReadOnly && (
        <Box sx={{ display: 'flex', gap: 1, alignItems: 'center' }}>
          <TextField
            label={`New name for ${field.label.toLowerCase()}`}
            value={name}
            onChange={(event) => setName(event.target.value)}
          />
          <Button disabled={name.trim() === '' || name.trim() in entries} onClick={add}>
            Add
          </Button>
        </Box>
      )}
    </Frame>
  );
}
