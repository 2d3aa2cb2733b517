import { z } from 'zod';
import { reasonSchema } from '../../rig-hosts/dto/rig-commands.dto.js';

/** People who can be named on one lockout. */
const namedMax = 20;

export const newLockoutSchema = z
  .object({
    reason: reasonSchema,
    /**
     * Accounts of safety officers or administrators who may lift it beside the person who sets it; where none is
     * named, every one of them may.
     */
    mayLift: z.array(z.string().min(1)).max(namedMax, `At most ${namedMax} people.`).default([]),
  })
  .meta({ id: 'NewLockout' });
export type NewLockout = z.infer<typeof newLockoutSchema>;

export const lockoutSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    /** Account of the person who holds the rig. */
    by: z.string(),
    reason: z.string(),
    at: z.string(),
    mayLift: z.array(z.string()),
  })
  .meta({ id: 'Lockout' });
export type Lockout = z.infer<typeof lockoutSchema>;

export const lockoutListSchema = z.array(lockoutSchema);
