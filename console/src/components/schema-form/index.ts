export { initialValue, type FormValue } from './field-value.js';
export type { JsonSchema } from './json-schema.types.js';
export { fieldsOf, labelOf, type SchemaField } from './schema-field.js';
export { schemaFaults } from './schema-faults.js';
export { SchemaForm, type SchemaFormProps } from './schema-form.js';
