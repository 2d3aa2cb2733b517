import { z } from 'zod';

/** Most rows of a trajectory: longer ones are thinned evenly. */
export const trajectoryRowsMax = 600;

export const timeToRestSchema = z.object({
  channel: z.string(),
  /** From the scan that tripped until the read-back was at rest for good, s; null where that was not seen. */
  timeS: z.number().nullable(),
});
export type TimeToRest = z.infer<typeof timeToRestSchema>;

/** How a rig came to rest after a trip, in a run or outside of one; from about a second before it. */
export const stopTrajectorySchema = z.object({
  /** Names of the values in each row: the channels but the traces, and `<actuator>.applied` for each actuator. */
  columns: z.array(z.string()),
  rows: z
    .array(
      z.object({
        /** Time since the scan that tripped, s; negative before it. */
        tS: z.number(),
        /** Null where not good, or not written, in that scan. */
        values: z.array(z.number().nullable()),
      }),
    )
    .max(trajectoryRowsMax),
  /** Each actuator with an approved limit, in the order of the envelope. */
  timesToRest: z.array(timeToRestSchema),
  /** False where the record ended before every actuator was at rest. */
  isAtRest: z.boolean(),
});
export type StopTrajectory = z.infer<typeof stopTrajectorySchema>;
