import { objectiveContentSchema, slugSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageQuerySchema, pageSchema } from '../../paging/page.js';

export const objectiveSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    /** Counts changes; also the ETag. */
    revision: z.int(),
    content: objectiveContentSchema.meta({ id: 'ObjectiveContent' }),
  })
  .meta({ id: 'Objective' });
export type Objective = z.infer<typeof objectiveSchema>;

export const objectivePageSchema = pageSchema(objectiveSchema).meta({ id: 'ObjectivePage' });

export const objectiveQuerySchema = pageQuerySchema.extend({ rigId: slugSchema.optional() });
export type ObjectiveQuery = z.infer<typeof objectiveQuerySchema>;

const contentInputSchema = objectiveContentSchema.meta({ id: 'ObjectiveContentInput' });

export const createObjectiveSchema = z
  .object({ rigId: slugSchema, content: contentInputSchema })
  .meta({ id: 'CreateObjective' });
export type CreateObjective = z.infer<typeof createObjectiveSchema>;

export const changeObjectiveSchema = z
  .object({ content: contentInputSchema })
  .meta({ id: 'ChangeObjective' });
export type ChangeObjective = z.infer<typeof changeObjectiveSchema>;
