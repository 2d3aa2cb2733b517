import { envelopeContentSchema, envelopeStatusSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';

export const envelopeSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    /** Number of the envelope among those of its rig, from 1. */
    version: z.int(),
    status: envelopeStatusSchema,
    /** Counts changes of the draft; also the ETag. */
    revision: z.int(),
    author: z.string(),
    submittedBy: z.string().nullable(),
    decidedBy: z.string().nullable(),
    /** Reason of the last decision. */
    reason: z.string().nullable(),
    createdAt: z.string(),
    decidedAt: z.string().nullable(),
    content: envelopeContentSchema.meta({ id: 'EnvelopeContent' }),
  })
  .meta({ id: 'Envelope' });
export type Envelope = z.infer<typeof envelopeSchema>;

export const envelopePageSchema = pageSchema(envelopeSchema).meta({ id: 'EnvelopePage' });

/** A draft as it is sent; fields with a default may be left out. */
export const envelopeDraftSchema = z
  .object({ content: envelopeContentSchema.meta({ id: 'EnvelopeContentInput' }) })
  .meta({ id: 'EnvelopeDraft' });
export type EnvelopeDraft = z.infer<typeof envelopeDraftSchema>;

export const decisionSchema = z
  .object({ reason: z.string().trim().min(1, 'Give a reason.').max(500) })
  .meta({ id: 'EnvelopeDecision' });
export type Decision = z.infer<typeof decisionSchema>;
