import { z } from 'zod';

/** Points of a trace that the answer to a live test shows. */
export const probedPointsMax = 16;

/** What the live test of one channel found. */
export const channelProbeSchema = z.object({
  channel: z.string(),
  /** When it was tried, ISO 8601, UTC. */
  at: z.string(),
  /**
   * `wire`: asked of the device by itself just now. `scan`: the last reading of the scan, because the adapter cannot
   * try one address, the connection is down, or the rig moves and its scan must not wait for a test.
   */
  source: z.enum(['wire', 'scan']),
  /** Why it was not asked of the device, in words; null where it was. */
  note: z.string().nullable(),
  /** What came over the wire, as a manual would write it; null where the adapter does not tell. */
  raw: z.string().nullable(),
  /** As the adapter gives it, before any calibration; null for a trace and where there is none. */
  value: z.number().nullable(),
  /** By the calibration in force; null where none holds for the channel, or the value is outside what it covers. */
  calibrated: z.number().nullable(),
  /** The calibration in force; null where there is none. */
  calibration: z.object({ id: z.string(), version: z.int() }).nullable(),
  /** For a trace: how many points it has, and the first of them. */
  trace: z.object({ count: z.int(), points: z.array(z.number()).max(probedPointsMax) }).nullable(),
  /** Age of what is shown, s: 0 where it came just now; null where nothing ever came. */
  ageS: z.number().nullable(),
  /** How far what is shown can be trusted. */
  quality: z.enum(['good', 'stale', 'bad', 'missing']),
  fault: z.object({ code: z.string(), message: z.string() }).nullable(),
});
export type ChannelProbe = z.infer<typeof channelProbeSchema>;
