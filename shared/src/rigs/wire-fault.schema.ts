import { z } from 'zod';
import { channelIdSchema } from './channel-id.js';

const dayS = 86_400;

/** When a fault strikes, and whom. */
const strikes = {
  /** Share of reads and writes that are hit, 0 to 1; drawn anew for each. */
  probability: z.number().min(0).max(1).default(1),
  /** Same seed, same calls hit. */
  seed: z.int().default(1),
  /** Begins this long after it was set, s. */
  fromS: z.number().min(0).max(dayS).default(0),
  /** Ends this long after it was set, s; null: it stays until it is cleared. */
  untilS: z.number().positive().max(dayS).nullable().default(null),
  /** Channels that are hit; null for all of the connection. What concerns the wire as a whole hits all. */
  channels: z.array(channelIdSchema).min(1).max(200).nullable().default(null),
};

const fault = <K extends string, S extends z.ZodRawShape>(kind: K, shape: S) =>
  z.object({ kind: z.literal(kind), ...shape, ...strikes });

const timeMs = (most: number) => z.number().positive().max(most);

/** What a wire can be made to suffer, on benches only. */
export const wireFaultSchema = z
  .discriminatedUnion('kind', [
    /** Every call takes this much longer. */
    fault('delay', { delayMs: timeMs(60_000) }),
    /** Every call takes longer by something between nothing and this, evenly. */
    fault('jitter', { mostMs: timeMs(60_000) }),
    /** The device needs this long for each value that it is asked for or told. */
    fault('slow-device', { perValueMs: timeMs(10_000) }),
    /** No answer: adapter.timeout after this time. Writes do not reach the device. */
    fault('drop', { timeoutMs: timeMs(60_000) }),
    /** The answer breaks off: what comes after the kept share is adapter.corrupt. Writes reach the device. */
    fault('truncate', { keptShare: z.number().min(0).max(0.999).default(0.5) }),
    /** No valid answer: adapter.corrupt. Writes reach the device. */
    fault('corrupt', {}),
    /** The device answers with the values of its last good read; writes are accepted and do nothing. */
    fault('freeze', {}),
    /** Another unit on the line answers: adapter.corrupt. Writes do not reach the device. */
    fault('wrong-unit', { answeringUnit: z.int().min(0).max(255).default(17) }),
    /**
     * The instrument is set to another engineering unit: it shows `factor · value + offset` without any sign of a
     * fault, and takes what is written the same way. The defaults turn °C into °F.
     */
    fault('wrong-scale', {
      factor: z
        .number()
        .refine((factor) => factor !== 0, 'Any factor but 0.')
        .default(1.8),
      offset: z.number().default(32),
    }),
    /** The device answers with an exception: adapter.refused. Writes do nothing. */
    fault('exception', { text: z.string().trim().min(1).max(200).default('illegal data address') }),
    /** The connection is lost: adapter.disconnected. Where it cannot be made again, opening fails as well. */
    fault('disconnect', { canReconnect: z.boolean().default(true) }),
  ])
  .refine(({ fromS, untilS }) => untilS === null || untilS > fromS, {
    path: ['untilS'],
    message: 'Must be later than "fromS".',
  });

export type WireFault = z.infer<typeof wireFaultSchema>;
/** As it may be written: what has a default may be left out. */
export type WireFaultInput = z.input<typeof wireFaultSchema>;
export type WireFaultKind = WireFault['kind'];

/** A fault as it stands on a connection, for everybody who looks at the connection. */
export const injectedFaultSchema = z.object({
  fault: wireFaultSchema,
  /** Who set it. */
  by: z.string(),
  /** When, ISO 8601, UTC. */
  at: z.string(),
  /** False before its beginning and after its end. */
  isActive: z.boolean(),
});
export type InjectedFault = z.infer<typeof injectedFaultSchema>;
