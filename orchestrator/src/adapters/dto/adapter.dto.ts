import type { AdapterListing } from '@cresthold/adapters';
import { z } from 'zod';

const jsonSchemaSchema = z.record(z.string(), z.unknown());

export const adapterSchema = z
  .object({
    /** Null where a broken plug-in does not tell. */
    id: z.string().nullable(),
    title: z.string(),
    /** Version of its package; null where that has none. */
    version: z.string().nullable(),
    /** Semver range of the contract that it was written for. */
    contract: z.string().nullable(),
    origin: z.enum(['shipped', 'plug-in']),
    /** What the configuration calls the plug-in; null for a shipped adapter. */
    reference: z.string().nullable(),
    state: z.enum(['ready', 'broken']),
    /** Why it is broken; null where it is ready. */
    error: z
      .object({
        code: z.string(),
        message: z.string(),
        details: z.array(z.object({ field: z.string(), message: z.string() })),
      })
      .nullable(),
    /** JSON Schema of a connection's configuration; null where it is broken. */
    configurationSchema: jsonSchemaSchema.nullable(),
    /** JSON Schema of a channel's address; null where it is broken. */
    addressSchema: jsonSchemaSchema.nullable(),
  })
  .meta({ id: 'Adapter' });
export type Adapter = z.infer<typeof adapterSchema>;

/** As the API tells it; the kind of an error is not part of it. */
export function toAdapter({ error, ...listing }: AdapterListing): Adapter {
  return {
    ...listing,
    error: error && { code: error.code, message: error.message, details: error.details },
  };
}

export const adapterListSchema = z
  .object({ items: z.array(adapterSchema), nextCursor: z.string().nullable() })
  .meta({ id: 'AdapterPage' });
