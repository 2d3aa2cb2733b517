import { z } from 'zod';
import { reservedWords } from '../expressions/expression-functions.js';
import { channelIdSchema, slugSchema, titleSchema } from './channel-id.js';

/** A JSON value; what an adapter's own schema says more about. */
const jsonObjectSchema = z.record(z.string(), z.unknown());

/** One wire to a rig, through one adapter. */
export const connectionSchema = z.object({
  id: slugSchema,
  title: titleSchema,
  /** Id of an installed adapter, e.g. `modbus-tcp`. */
  adapter: slugSchema,
  /** Checked against the adapter's own configuration schema. */
  configuration: jsonObjectSchema,
});

const channelBase = {
  id: channelIdSchema,
  title: titleSchema,
  /** Unit as it is shown and as limits and expressions use it, e.g. `%`, `°C`, `ppm`; empty for a pure number. */
  unit: z.string().max(16).default(''),
  /** Range of the display, in the channel's unit; no limit. */
  display: z.object({ min: z.number(), max: z.number(), decimals: z.int().min(0).max(9) }),
};

const wired = {
  connection: slugSchema,
  /** Checked against the adapter's channel-address schema. */
  address: jsonObjectSchema,
};

/** What the points of a trace stand for: point i is at `from + i * step`, in `unit`. */
export const traceAxisSchema = z.object({
  title: titleSchema,
  unit: z.string().max(16).default(''),
  from: z.number(),
  step: z.number().positive(),
});

/** One named quantity with a unit. A trace is an array per scan; how many points it has, its address says. */
export const channelSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('sensor'), ...channelBase, ...wired }),
  z.object({ kind: z.literal('actuator'), ...channelBase, ...wired }),
  z.object({ kind: z.literal('trace'), ...channelBase, ...wired, axis: traceAxisSchema }),
  z.object({ kind: z.literal('derived'), ...channelBase, expression: z.string().min(1).max(500) }),
]);

/** What is tested, with its connections and channels. */
export const rigSchema = z
  .object({
    id: slugSchema,
    title: titleSchema,
    description: z.string().max(2000).default(''),
    /**
     * A simulated rig, on which faults may be injected. Never set it for a machine: a fault hides what the machine
     * does. Changing it withdraws the envelope in force.
     */
    isBench: z.boolean().default(false),
    /** Time between two scans, ms, 1 to 10 000. */
    periodMs: z.number().min(1).max(10_000),
    connections: z.array(connectionSchema).min(1, 'Add a connection.').max(16, 'At most 16 connections.'),
    channels: z.array(channelSchema).min(1, 'Add a channel.').max(200, 'At most 200 channels.'),
  })
  .superRefine((rig, context) => {
    reportDuplicates(rig.connections, 'connections', context);
    reportDuplicates(rig.channels, 'channels', context);
    const connections = new Set(rig.connections.map((c) => c.id));
    rig.channels.forEach((channel, index) => {
      // The objective has a symbol in expressions and a column in run files of its own.
      if (reservedWords.has(channel.id) || channel.id === 'objective') {
        context.addIssue({
          code: 'custom',
          path: ['channels', index, 'id'],
          message: `"${channel.id}" means something in expressions: choose another name.`,
        });
      }
      if (channel.kind !== 'derived' && !connections.has(channel.connection)) {
        context.addIssue({
          code: 'custom',
          path: ['channels', index, 'connection'],
          message: `The rig has no connection "${channel.connection}".`,
        });
      }
      if (channel.display.min >= channel.display.max) {
        context.addIssue({
          code: 'custom',
          path: ['channels', index, 'display', 'min'],
          message: 'The lower end of the display range must be below the upper end.',
        });
      }
    });
  });

function reportDuplicates(items: { id: string }[], list: string, context: z.RefinementCtx): void {
  const seen = new Set<string>();
  items.forEach((item, index) => {
    if (seen.has(item.id)) {
      context.addIssue({
        code: 'custom',
        path: [list, index, 'id'],
        message: `"${item.id}" is used twice: ids are unique within a rig.`,
      });
    }
    seen.add(item.id);
  });
}

export type Connection = z.infer<typeof connectionSchema>;
export type Channel = z.infer<typeof channelSchema>;
export type WiredChannel = Exclude<Channel, { kind: 'derived' }>;
export type TraceAxis = z.infer<typeof traceAxisSchema>;
export type Rig = z.infer<typeof rigSchema>;
