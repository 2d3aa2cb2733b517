import { rigSchema, rigStatusSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';

/** A rig as it is sent; fields with a default may be left out. */
export const rigInputSchema = rigSchema.meta({ id: 'RigInput' });

/** One schema for every answer that carries a status, so that the document has one component for it. */
export const rigStatusDtoSchema = rigStatusSchema.meta({ id: 'RigStatus' });

export const rigDocumentSchema = z
  .object({
    id: z.string(),
    /** Counts changes of the wiring; also the ETag. */
    revision: z.int(),
    content: rigSchema.meta({ id: 'Rig' }),
    /** Null while no rig host runs for the rig. */
    status: rigStatusDtoSchema.nullable(),
  })
  .meta({ id: 'RigDocument' });
export type RigDocument = z.infer<typeof rigDocumentSchema>;

export const rigPageSchema = pageSchema(rigDocumentSchema).meta({ id: 'RigPage' });
