import { useMemo } from 'react';
import type { FieldFault } from '@cresthold/shared';
import { FormContextProvider } from './form-context.js';
import type { FormValue } from './field-value.js';
import type { JsonSchema } from './json-schema.types.js';
import { FieldGroup } from './nested-fields.js';
import { fieldsOf } from './schema-field.js';
import { schemaFaults } from './schema-faults.js';

export interface SchemaFormProps {
  /** Schema of an object. */
  schema: JsonSchema;
  value: FormValue;
  onChange: (value: FormValue) => void;
  /** Path of the value in what is sent, e.g. `connections[0].configuration`; faults are looked up below it. */
  root?: string;
  /** What the server said; it stands before what the form finds by itself. */
  faults?: readonly FieldFault[];
  /** Whether what the form finds by itself is shown, e.g. after a first attempt to save. */
  isChecked?: boolean;
  isReadOnly?: boolean;
}

/**
 * A form drawn from a JSON Schema: one field for each property, with title, help, range and choices, faults right
 * below the field that they belong to, and nested objects, lists and tables.
 */
export function SchemaForm(props: SchemaFormProps) {
  const { schema, value, onChange, root = '', faults, isChecked = false, isReadOnly = false } = props;
  const fields = useMemo(() => fieldsOf(schema), [schema]);
  const context = useMemo(() => {
    const own = isChecked ? schemaFaults(schema, value, root) : [];
    const messages = new Map([...own, ...(faults ?? [])].map(({ field, message }) => [field, message]));
    return {
      isReadOnly,
      faultAt: (path: string) => messages.get(path) ?? messages.get(`content.${path}`),
    };
  }, [schema, value, root, faults, isChecked, isReadOnly]);
  return (
    <FormContextProvider value={context}>
      <FieldGroup fields={fields} path={root} value={value} onChange={onChange} />
    </FormContextProvider>
  );
}
