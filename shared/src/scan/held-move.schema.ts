import { z } from 'zod';

/** Longest time for which a held move may go on without a renewal, s. */
export const holdForMaxS = 2;
const holdForMinS = 0.1;

/** What keeps a move going: it must be renewed within `forS`, or the actuator stops where it is. */
export const moveHoldSchema = z.object({
  /** Names one press of the control; renewals give the same, a new press a new one. */
  id: z.string().trim().min(1, 'Name the press.').max(64, 'At most 64 characters.'),
  /** How long the move goes on after the last renewal, s. */
  forS: z
    .number()
    .min(holdForMinS, `At least ${holdForMinS} s.`)
    .max(holdForMaxS, `At most ${holdForMaxS} s.`),
});
export type MoveHold = z.infer<typeof moveHoldSchema>;

/** A held move that is going on. */
export const heldMoveSchema = z.object({
  channel: z.string(),
  /** Where it leads, in the channel's unit. */
  value: z.number(),
  /** Who holds it. */
  by: z.string(),
});
export type HeldMove = z.infer<typeof heldMoveSchema>;

/** What a command to move did: began a move, or renewed one that is held. */
export const moveAnswerSchema = z.object({ isRenewal: z.boolean() });
export type MoveAnswer = z.infer<typeof moveAnswerSchema>;
