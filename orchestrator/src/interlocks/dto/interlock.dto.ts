import { z } from 'zod';

export const bypassSchema = z
  .object({
    /** Duration, s; at most what the envelope allows for this interlock. */
    forS: z.number().positive('Give a time above 0.'),
    reason: z.string().trim().min(1, 'Say why it is bypassed.').max(300, 'At most 300 characters.'),
  })
  .meta({ id: 'InterlockBypassOrder' });
export type BypassOrder = z.infer<typeof bypassSchema>;
