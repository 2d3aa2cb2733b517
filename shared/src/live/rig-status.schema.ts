import { z } from 'zod';
import { heldMoveSchema } from '../scan/held-move.schema.js';
import { injectedFaultSchema } from '../rigs/wire-fault.schema.js';

/** Where a rig is; lockout is beside it, not among it. */
export const rigPhaseSchema = z.enum(['offline', 'idle', 'armed', 'running', 'stopping', 'tripped']);
export type RigPhase = z.infer<typeof rigPhaseSchema>;

/** A latched stop with its first cause. */
export const tripSchema = z.object({
  /** What came first: `emergency-stop`, `emergency-stop-input:<channel>`, `interlock:<id>`, `stale:<channel>`, `read-back:<channel>`, `overrun`,
   * `connection:<id>`, `non-finite:<channel>`, `server-silent`, `host-lost`, `host-fault`, `recorder`. */
  cause: z.string(),
  message: z.string(),
  at: z.string(),
  /** Who pressed, for an emergency stop. */
  by: z.string().nullable(),
  /** What followed while it was latched, oldest first; never overwrites the cause. */
  later: z.array(z.object({ cause: z.string(), at: z.string() })).max(50),
});
export type Trip = z.infer<typeof tripSchema>;

/** A bypass that is going on. */
export const interlockBypassSchema = z.object({
  by: z.string(),
  reason: z.string(),
  /** When it ends by itself, ISO 8601; the rig's own count of time decides. */
  untilAt: z.string(),
});
export type InterlockBypass = z.infer<typeof interlockBypassSchema>;

export const interlockStatusSchema = z.object({
  id: z.string(),
  state: z.enum(['clear', 'pending', 'acted', 'latched']),
  isBypassed: z.boolean(),
  /** Null where it is not bypassed. */
  bypass: interlockBypassSchema.nullable(),
  /** A proof test takes its condition as true. */
  isForced: z.boolean(),
});

export const rigStatusSchema = z.object({
  rigId: z.string(),
  phase: rigPhaseSchema,
  isLockedOut: z.boolean(),
  trip: tripSchema.nullable(),
  runId: z.string().nullable(),
  activeSteps: z.array(z.string()),
  isPaused: z.boolean(),
  envelopeVersion: z.int().nullable(),
  connections: z.array(
    z.object({
      id: z.string(),
      isConnected: z.boolean(),
      error: z.string().nullable(),
      /** A fault that was put on this connection of a bench; null where there is none. */
      injectedFault: injectedFaultSchema.nullable(),
    }),
  ),
  /** Channels that their connection does not deliver although it is up, and why. */
  channelFaults: z.array(z.object({ channel: z.string(), code: z.string(), message: z.string() })),
  interlocks: z.array(interlockStatusSchema),
  /** Manual moves that go on only while somebody holds them. */
  heldMoves: z.array(heldMoveSchema),
  /** What forbids arming, in words; empty where nothing does. */
  armingObstacles: z.array(z.string()),
  /**
   * Best-known point by actuator: of the run that is going on, so far; else of the run that ended last since the
   * rig host began, because that is what people come back to. Empty where nothing was sought.
   */
  bestPoint: z.record(z.string(), z.number()),
  scan: z.object({
    count: z.int(),
    overruns: z.int(),
    /** 99th percentile over the last scans, ms. */
    latenessP99Ms: z.number(),
    /** Mean time on the wire, ms. */
    wireMeanMs: z.number(),
  }),
});
export type RigStatus = z.infer<typeof rigStatusSchema>;
