import { channelIdSchema, moveHoldSchema, wireFaultSchema } from '@cresthold/shared';
import { z } from 'zod';
import { rigStatusDtoSchema } from '../../rigs/dto/rig.dto.js';

/** A longer reason for an emergency stop is cut. */
export const stopReasonLengthMax = 300;

export const reasonSchema = z.string().trim().min(1, 'Give a reason.').max(300, 'At most 300 characters.');

export const rigStatusListSchema = z.array(rigStatusDtoSchema);

export const moveSchema = z
  .object({
    channel: channelIdSchema,
    /** Where to, in the channel's unit. */
    value: z.number(),
    /** Who renews it; null for a move that goes on by itself, which a script must say. */
    hold: moveHoldSchema.nullable(),
  })
  .meta({ id: 'Move' });
export type Move = z.infer<typeof moveSchema>;

export const moveReleaseSchema = z
  .object({
    channel: channelIdSchema,
    /** `hold.id` of the press that is over. */
    holdId: moveHoldSchema.shape.id,
  })
  .meta({ id: 'MoveRelease' });
export type MoveRelease = z.infer<typeof moveReleaseSchema>;

/** Described here, judged by nobody: see `StopReason`. */
export const emergencyStopBody = {
  required: false,
  schema: {
    type: 'object',
    properties: { reason: { type: 'string', maxLength: stopReasonLengthMax } },
  },
} as const;

export const reasonedSchema = z.object({ reason: reasonSchema }).meta({ id: 'Reasoned' });
export type Reasoned = z.infer<typeof reasonedSchema>;

export const faultChangeSchema = z
  .object({
    /** The fault in place of the one before; null takes it off. */
    fault: wireFaultSchema.nullable(),
  })
  .meta({ id: 'FaultChange' });
export type FaultChange = z.infer<typeof faultChangeSchema>;
