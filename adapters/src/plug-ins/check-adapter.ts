import { DomainError, type FieldFault } from '@cresthold/shared';
import { z } from 'zod';
import { type Adapter, contractVersion } from '../contract.js';
import { meetsRange } from '../semver-range.js';

export type JsonSchema = Record<string, unknown>;

/** What may be given to a schema of a manifest, as JSON Schema. @throws Error where it cannot be shown as one */
export function formSchemaOf(schema: z.ZodType): JsonSchema {
  return z.toJSONSchema(schema, { io: 'input' });
}

const isText = (value: unknown, most: number): value is string =>
  typeof value === 'string' && value.trim() !== '' && value.length <= most;

/**
 * What a plug-in exports, as an adapter.
 *
 * @throws plug-in.malformed with one detail for each part that is missing or wrong
 * @throws plug-in.other-contract
 */
export function checkAdapter(exported: unknown): Adapter {
  if (!isRecord(exported) || !isRecord(exported['manifest'])) {
    const message = 'Export an adapter, or an array of adapters, as default: { manifest, open }.';
    throw new DomainError('plug-in.malformed', message, [{ field: 'default', message }]);
  }
  const { manifest } = exported;
  const faults = [...manifestFaults(manifest), ...functionFaults(exported)];
  if (faults.length > 0) {
    const text = faults.map(({ field, message }) => `${field}: ${message}`).join(' ');
    throw new DomainError('plug-in.malformed', text, faults);
  }
  const adapter = exported as unknown as Adapter;
  requireContract(adapter);
  return adapter;
}

/** @throws plug-in.other-contract */
export function requireContract({ manifest: { id, contract } }: Adapter): void {
  if (meetsRange(contractVersion, contract)) return;
  const message = `Adapter "${id}" was written for contract ${contract}, this is ${contractVersion}: install a matching one.`;
  throw new DomainError('plug-in.other-contract', message, [{ field: 'manifest.contract', message }]);
}

function manifestFaults(manifest: Record<string, unknown>): FieldFault[] {
  const faults: FieldFault[] = [];
  const fault = (field: string, message: string) => faults.push({ field: `manifest.${field}`, message });
  if (!isText(manifest['id'], 40) || !/^[a-z][a-z0-9-]*$/.test(manifest['id'])) {
    fault('id', 'Give a lower-case letter, then lower-case letters, digits and hyphens, 40 at most.');
  }
  if (!isText(manifest['title'], 120)) fault('title', 'Give a title of 120 characters at most.');
  if (!isText(manifest['contract'], 40)) fault('contract', `Give a range, e.g. "^${contractVersion}".`);
  for (const name of ['configurationSchema', 'addressSchema']) {
    const message = schemaFault(manifest[name]);
    if (message !== null) fault(name, message);
  }
  return faults;
}

function schemaFault(schema: unknown): string | null {
  if (!isRecord(schema) || !('_zod' in schema) || typeof schema['safeParse'] !== 'function') {
    return 'Give a schema of zod 4, e.g. the "z" that @cresthold/adapters exports.';
  }
  try {
    const { type } = formSchemaOf(schema as unknown as z.ZodType);
    return type === 'object' ? null : 'Give a schema of an object: a form is drawn from its fields.';
  } catch (error) {
    return `It cannot be shown as a form: ${error instanceof Error ? error.message : String(error)}.`;
  }
}

function functionFaults(exported: Record<string, unknown>): FieldFault[] {
  const faults: FieldFault[] = [];
  if (typeof exported['open'] !== 'function') {
    faults.push({ field: 'open', message: 'Give a function that opens a session.' });
  }
  if (exported['estimate'] !== undefined && typeof exported['estimate'] !== 'function') {
    faults.push({ field: 'estimate', message: 'Give a function, or leave it out.' });
  }
  return faults;
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null;
}
