import { z } from 'zod';
import { channelIdSchema } from './channel-id.js';

const dayS = 86_400;

/** When a fault strikes, and whom. */
const strikes = {
  probability: z.number().min(0).max(1).default(1).meta({
    title: 'Probability',
    description: 'Share of reads and writes that are hit, drawn anew for each.',
  }),
  seed: z.int().default(1).meta({ title: 'Seed', description: 'Same seed, same calls hit.' }),
  fromS: z
    .number()
    .min(0)
    .max(dayS)
    .default(0)
    .meta({ title: 'Begins after, s', description: 'Counted from when the fault is put.' }),
  untilS: z
    .number()
    .positive()
    .max(dayS)
    .nullable()
    .default(null)
    .meta({ title: 'Ends after, s', description: 'Empty: it stays until it is taken off.' }),
  channels: z.array(channelIdSchema).min(1).max(200).nullable().default(null).meta({
    title: 'Channels',
    description: 'Those that are hit; none named: all. What concerns the wire as a whole hits all.',
  }),
};

const fault = <K extends string, S extends z.ZodRawShape>(
  kind: K,
  title: string,
  description: string,
  shape: S,
) => z.object({ kind: z.literal(kind), ...shape, ...strikes }).meta({ title, description });

const timeMs = (most: number, title: string) => z.number().positive().max(most).meta({ title });

/** What a wire can be made to suffer, on benches only; what each kind does stands beside it. */
export const wireFaultSchema = z
  .discriminatedUnion('kind', [
    fault('delay', 'Delay', 'Every read and write takes longer.', { delayMs: timeMs(60_000, 'Delay, ms') }),
    fault('jitter', 'Jitter', 'Every read and write takes longer by something between nothing and this.', {
      mostMs: timeMs(60_000, 'Longest, ms'),
    }),
    fault(
      'slow-device',
      'Slow device',
      'The device needs time for each value that it is asked for or told.',
      {
        perValueMs: timeMs(10_000, 'Time for each value, ms'),
      },
    ),
    fault('drop', 'No answer', 'The device does not answer: a timeout. Writes do not reach it.', {
      timeoutMs: timeMs(60_000, 'Time until the timeout, ms'),
    }),
    fault(
      'truncate',
      'Answer breaks off',
      'What comes after the kept share is corrupt. Writes reach the device.',
      {
        keptShare: z.number().min(0).max(0.999).default(0.5).meta({ title: 'Kept share' }),
      },
    ),
    fault('corrupt', 'Corrupt answer', 'What comes is no valid answer. Writes reach the device.', {}),
    fault(
      'freeze',
      'Frozen values',
      'The device answers with the values of its last good read. Writes are accepted and do nothing.',
      {},
    ),
    fault(
      'wrong-unit',
      'Wrong unit answers',
      'Another unit on the line answers. Writes do not reach the device.',
      {
        answeringUnit: z.int().min(0).max(255).default(17).meta({ title: 'Unit that answers' }),
      },
    ),
    fault(
      'wrong-scale',
      'Wrong engineering unit',
      'Shows factor · value + offset without any sign of a fault, and takes writes the same way. As it stands: °F for °C.',
      {
        factor: z
          .number()
          .refine((factor) => factor !== 0, 'Any factor but 0.')
          .default(1.8)
          .meta({ title: 'Factor' }),
        offset: z.number().default(32).meta({ title: 'Offset' }),
      },
    ),
    fault('exception', 'Device refuses', 'The device answers with an exception. Writes do nothing.', {
      text: z.string().trim().min(1).max(200).default('illegal data address').meta({ title: 'Its words' }),
    }),
    fault('disconnect', 'Disconnect', 'The connection is lost.', {
      canReconnect: z.boolean().default(true).meta({
        title: 'Can be made again',
        description: 'Off: it stays down until the fault is taken off.',
      }),
    }),
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
