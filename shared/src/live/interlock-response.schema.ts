import { z } from 'zod';

/** How quickly an interlock acted, as its rig host measured it on its monotonic clock. */
export const interlockResponseSchema = z.object({
  interlock: z.string(),
  /** Wall time of the scan in which its condition became true, ms since 1970. */
  atMs: z.number(),
  /** From the beginning of that scan until the device had answered the writes of the scan in which it acted, ms. */
  responseMs: z.number(),
  /** Actuators written in that scan; 0 where there was nothing to stop, and for an interlock that only warns or pauses. */
  writes: z.int(),
  /** Its condition was taken as true for a proof test. */
  isForced: z.boolean(),
});
export type InterlockResponse = z.infer<typeof interlockResponseSchema>;
