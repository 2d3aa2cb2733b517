import { z } from 'zod';
import { pageQuerySchema, pageSchema } from '../../paging/page.js';

export const auditEntrySchema = z
  .object({
    id: z.int(),
    at: z.string(),
    account: z.string(),
    action: z.string(),
    rigId: z.string().nullable(),
    subject: z.string().nullable(),
    reason: z.string().nullable(),
    before: z.unknown().nullable().describe('What it was before; null where that is not kept.'),
    after: z.unknown().nullable().describe('What it became; null where that is not kept.'),
    hash: z.string(),
  })
  .meta({ id: 'AuditEntry' });
export type AuditRecord = z.infer<typeof auditEntrySchema>;

export const auditPageSchema = pageSchema(auditEntrySchema).meta({ id: 'AuditPage' });

const filters = {
  rigId: z.string().max(40).optional(),
  account: z.string().max(64).optional(),
  action: z.string().max(64).optional().describe('An action, or its beginning: `envelope.`'),
  subject: z.string().max(100).optional(),
  from: z.iso.datetime().optional().describe('Not before this time.'),
  to: z.iso.datetime().optional().describe('Before this time.'),
  text: z.string().max(100).optional().describe('Part of the reason.'),
};
export const auditFilterSchema = z.object(filters);
export type AuditFilter = z.infer<typeof auditFilterSchema>;
export const auditQuerySchema = pageQuerySchema.extend(filters);
export type AuditQuery = z.infer<typeof auditQuerySchema>;

export const auditVerificationSchema = z
  .object({
    isIntact: z.boolean(),
    /** Entries that were found in order. */
    entries: z.int(),
    /** Hash of the last of them: note it elsewhere to prove later that nothing was cut off. */
    headHash: z.string(),
    firstBreak: z.object({ id: z.int(), what: z.string() }).nullable(),
    /** Runs whose seal is not the one that the chain keeps. */
    badSeals: z.array(z.string()),
  })
  .meta({ id: 'AuditVerification' });
export type AuditVerification = z.infer<typeof auditVerificationSchema>;
