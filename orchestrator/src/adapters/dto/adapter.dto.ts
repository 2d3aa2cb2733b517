import { z } from 'zod';

const jsonSchemaSchema = z.record(z.string(), z.unknown());

export const adapterSchema = z
  .object({
    id: z.string(),
    title: z.string(),
    /** JSON Schema of a connection's configuration. */
    configurationSchema: jsonSchemaSchema,
    /** JSON Schema of a channel's address. */
    addressSchema: jsonSchemaSchema,
  })
  .meta({ id: 'Adapter' });
export type Adapter = z.infer<typeof adapterSchema>;

export const adapterListSchema = z
  .object({ items: z.array(adapterSchema), nextCursor: z.string().nullable() })
  .meta({ id: 'AdapterPage' });
