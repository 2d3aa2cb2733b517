import { stopTrajectorySchema, timeToRestSchema, tripSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';
import type { RigTripEntity } from '../entities/rig-trip.entity.js';

export const tripSummarySchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    /** First cause, who pressed, and what followed. */
    trip: tripSchema,
    /** Null while it is latched. */
    resetAt: z.string().nullable(),
    resetBy: z.string().nullable(),
    resetReason: z.string().nullable(),
    /** Null where the way to rest was not seen, or is still going on. */
    timesToRest: z.array(timeToRestSchema).nullable(),
  })
  .meta({ id: 'TripSummary' });
export type TripSummary = z.infer<typeof tripSummarySchema>;

export const tripPageSchema = pageSchema(tripSummarySchema).meta({ id: 'TripPage' });

export const tripDocumentSchema = tripSummarySchema
  .extend({
    /** Null where there is none, or it was too old to be kept. */
    trajectory: stopTrajectorySchema.nullable(),
  })
  .meta({ id: 'TripDocument' });
export type TripDocument = z.infer<typeof tripDocumentSchema>;

export function toTripSummary(row: RigTripEntity): TripSummary {
  const { id, rigId, trip, resetAt, resetBy, resetReason, timesToRest } = row;
  return { id, rigId, trip, resetAt, resetBy, resetReason, timesToRest };
}
