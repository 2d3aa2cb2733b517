import { z } from 'zod';
import { interlockActionSchema } from '../envelope.schema.js';

/** Most episodes of one interlock that a report lists; all are counted. */
export const replayEpisodesMax = 50;

/** The worst value of something in a run, and when; null where it never had one. Times are s since the run began. */
const extremeSchema = z.object({ value: z.number(), atTS: z.number() }).nullable();

export const replayedInterlockSchema = z.object({
  id: z.string(),
  title: z.string(),
  action: interlockActionSchema,
  /** Why it could not be judged by this record; null where it was. */
  whyNotJudged: z.string().nullable(),
  /** How often it would have acted. */
  acts: z.int(),
  /** When it would have acted and for how long it would have stayed so, s; `isOpen` where the record ended before. */
  episodes: z
    .array(z.object({ fromTS: z.number(), durationS: z.number(), isOpen: z.boolean() }))
    .max(replayEpisodesMax),
  totalS: z.number(),
  /** Its condition held in the first scan: since when before that is not recorded. */
  isTrueAtStart: z.boolean(),
  /** Times in which its condition held, but for less than its delay. */
  nearMisses: z.int(),
  longestNearMissS: z.number(),
  /** Scans in which a reading that it needs was not good: these count as violated. */
  badScans: z.int(),
  /** Least distance to the threshold on the safe side, channel unit, negative past it; null unless it is a simple threshold. */
  leastMargin: extremeSchema,
  marginChannel: z.string().nullable(),
});
export type ReplayedInterlock = z.infer<typeof replayedInterlockSchema>;

/** How often a limit of the draft would have changed what was asked for, and the least distance to it. */
const clipsSchema = z.object({ clips: z.int(), leastMargin: extremeSchema });

export const replayedActuatorSchema = z.object({
  channel: z.string(),
  /** False where the draft has no limit for it: it could not have been moved at all. */
  isLimited: z.boolean(),
  /** Scans in which a step asked for a value. */
  requests: z.int(),
  /** Margin of what was asked for to the nearer end of the range, channel unit. */
  range: clipsSchema,
  /** Margin of the movement of what was applied to the slew limit, channel unit per s. */
  slew: clipsSchema,
  /** Margin of the dither that a Seek asked for around its estimate, channel unit. */
  dither: clipsSchema,
  /** Scans in which what was applied lies outside the draft's range. */
  appliedOutside: z.int(),
  /** Times the read-back would have been outside its tolerance for too long. */
  readBackTrips: z.int(),
  /** Margin of the read-back error to its tolerance, channel unit. */
  readBackLeastMargin: extremeSchema,
});
export type ReplayedActuator = z.infer<typeof replayedActuatorSchema>;

export const replayedStalenessSchema = z.object({
  channel: z.string(),
  trips: z.int(),
  firstTS: z.number().nullable(),
  /** Greatest age of its last good value, s, counted from the first scan at the earliest. */
  oldestS: z.number(),
  oldestAtTS: z.number(),
});
export type ReplayedStaleness = z.infer<typeof replayedStalenessSchema>;

export const replayedEmergencyStopSchema = z.object({
  channel: z.string(),
  title: z.string(),
  presses: z.int(),
  firstTS: z.number().nullable(),
});

/** What ends motion: the cause as a trip names it. */
export const haltSchema = z.object({ cause: z.string(), action: z.enum(['stop', 'trip']), tS: z.number() });
export type Halt = z.infer<typeof haltSchema>;

export const replayHintSchema = z.object({
  /** `nuisance`: a run that ended well would have been ended. `missing`: one that tripped would not have. `late`: later than it did. */
  kind: z.enum(['nuisance', 'missing', 'late']),
  text: z.string(),
});
export type ReplayHint = z.infer<typeof replayHintSchema>;

/** What an envelope would have done in one recorded run. */
export const replayReportSchema = z.object({
  scans: z.int(),
  /** Time of the last scan that was judged, s since the run began. */
  untilTS: z.number(),
  /** The first that would have ended motion; what is listed after it would not have come to pass. */
  firstHalt: haltSchema.nullable(),
  interlocks: z.array(replayedInterlockSchema),
  actuators: z.array(replayedActuatorSchema),
  staleness: z.array(replayedStalenessSchema),
  emergencyStops: z.array(replayedEmergencyStopSchema),
  /** Most overruns in a row that the record tells of, and whether that would have tripped. */
  overruns: z.object({ mostInARow: z.int(), limit: z.int(), isTrip: z.boolean() }),
  hints: z.array(replayHintSchema),
});
export type ReplayReport = z.infer<typeof replayReportSchema>;
