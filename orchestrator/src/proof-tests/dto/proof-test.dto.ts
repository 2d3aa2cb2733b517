import { interlockActionSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';

/** `forced`: the judge takes the condition as true. `made-real`: somebody makes it true on the rig. */
const methodSchema = z.enum(['forced', 'made-real']);
export type ProofTestMethod = z.infer<typeof methodSchema>;
const outcomeSchema = z.enum(['pass', 'fail']);
export type ProofTestOutcome = z.infer<typeof outcomeSchema>;
const statusSchema = z.enum(['open', 'signed', 'abandoned']);
export type ProofTestStatus = z.infer<typeof statusSchema>;

export const proofTestSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    envelopeVersion: z.int(),
    interlock: z.string(),
    title: z.string(),
    action: interlockActionSchema,
    method: methodSchema,
    status: statusSchema,
    startedBy: z.string(),
    startedAt: z.string(),
    /** Longest response that is expected, ms: the interlock's delay and two scans. */
    limitMs: z.number(),
    /** When its condition became true; null before. */
    conditionAt: z.string().nullable(),
    /** From the beginning of that scan until the device had answered the writes, ms; null before. */
    responseMs: z.number().nullable(),
    /** Actuators that were written when it acted; null before. */
    writes: z.int().nullable(),
    outcome: outcomeSchema.nullable(),
    note: z.string().nullable(),
    signedBy: z.string().nullable(),
    signedAt: z.string().nullable(),
  })
  .meta({ id: 'ProofTest' });
export type ProofTest = z.infer<typeof proofTestSchema>;

export const proofTestPageSchema = pageSchema(proofTestSchema).meta({ id: 'ProofTestPage' });

export const proofTestStartSchema = z
  .object({ interlock: z.string().min(1), method: methodSchema })
  .meta({ id: 'ProofTestStart' });
export type ProofTestStart = z.infer<typeof proofTestStartSchema>;

export const proofTestSignatureSchema = z
  .object({ outcome: outcomeSchema, note: z.string().trim().max(1000).default('') })
  .meta({ id: 'ProofTestSignature' });
export type ProofTestSignature = z.infer<typeof proofTestSignatureSchema>;

/**
 * `in-date` · `due-soon`: within 14 days · `due`: has to be done, arming is still allowed · `overdue` and `failed`
 * forbid arming.
 */
const dueStateSchema = z.enum(['in-date', 'due-soon', 'due', 'overdue', 'failed']);
export type ProofTestDueState = z.infer<typeof dueStateSchema>;

export const proofTestDueSchema = z
  .object({
    interlock: z.string(),
    title: z.string(),
    state: dueStateSchema,
    /** Of this interlock as it is now; null where it has not been tested. */
    lastTest: proofTestSchema.nullable(),
    dueAt: z.string(),
    /** From when on it forbids arming. */
    forbidsArmingAt: z.string(),
  })
  .meta({ id: 'ProofTestDue' });
export type ProofTestDue = z.infer<typeof proofTestDueSchema>;

export const proofTestDueListSchema = z.array(proofTestDueSchema);
