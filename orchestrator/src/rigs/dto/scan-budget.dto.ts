import { z } from 'zod';

/** A rig on its way: anything may be missing or wrong. */
export const rigDraftSchema = z.record(z.string(), z.unknown()).meta({ id: 'RigDraft' });
export type RigDraft = z.infer<typeof rigDraftSchema>;

export const scanBudgetSchema = z
  .object({
    /** What making this a rig would be refused with, field by field. */
    faults: z.array(z.object({ field: z.string(), message: z.string() })),
    /** In the order of the draft. */
    connections: z.array(
      z.object({
        id: z.string(),
        /** Channels that are counted, and those that are not because their address is at fault. */
        channels: z.int(),
        leftOut: z.int(),
        /** Requests of one scan; null where they cannot be told. */
        requests: z.int().nullable(),
        /** Time on the wire of one scan with a device that answers at once, s; null where the wire sets no bound. */
        wireS: z.number().nullable(),
        /** Why the requests cannot be told; null where they are. */
        note: z.string().nullable(),
      }),
    ),
    /** Requests of one scan over all connections that can be told. */
    requests: z.int(),
    /** Wire time of a scan, s: connections are read side by side, so that of the slowest; null where no wire sets a bound. */
    wireS: z.number().nullable(),
    /** Null where the draft has no valid one. */
    periodMs: z.number().nullable(),
    /** `wireS` over the period; null where one of them is not known. Writes of moving actuators come on top. */
    shareOfPeriod: z.number().nullable(),
  })
  .meta({ id: 'ScanBudget' });
export type ScanBudget = z.infer<typeof scanBudgetSchema>;
