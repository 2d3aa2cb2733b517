import { experimentContentSchema, preflightFaultSchema, slugSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageQuerySchema, pageSchema } from '../../paging/page.js';

export const experimentSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    /** Title of the latest version. */
    title: z.string(),
    latestVersion: z.int(),
    createdAt: z.string(),
    createdBy: z.string(),
  })
  .meta({ id: 'Experiment' });
export type Experiment = z.infer<typeof experimentSchema>;

export const experimentPageSchema = pageSchema(experimentSchema).meta({ id: 'ExperimentPage' });

export const experimentQuerySchema = pageQuerySchema.extend({ rigId: slugSchema.optional() });
export type ExperimentQuery = z.infer<typeof experimentQuerySchema>;

export const experimentVersionSchema = z
  .object({
    experimentId: z.string(),
    version: z.int(),
    basedOn: z.int().nullable(),
    note: z.string(),
    createdAt: z.string(),
    createdBy: z.string(),
    content: experimentContentSchema.meta({ id: 'ExperimentContent' }),
  })
  .meta({ id: 'ExperimentVersion' });
export type ExperimentVersion = z.infer<typeof experimentVersionSchema>;

export const experimentVersionPageSchema = pageSchema(experimentVersionSchema).meta({
  id: 'ExperimentVersionPage',
});

const contentInputSchema = experimentContentSchema.meta({ id: 'ExperimentContentInput' });

export const createExperimentSchema = z
  .object({ rigId: slugSchema, content: contentInputSchema })
  .meta({ id: 'CreateExperiment' });
export type CreateExperiment = z.infer<typeof createExperimentSchema>;

export const createVersionSchema = z
  .object({
    /** The version that was open when this one was made; it must still be the latest. */
    basedOn: z.int().min(1),
    note: z.string().trim().max(500).default(''),
    content: contentInputSchema,
  })
  .meta({ id: 'CreateExperimentVersion' });
export type CreateVersion = z.infer<typeof createVersionSchema>;

export const versionNumberSchema = z.coerce.number().int().min(1);

export const preflightRequestSchema = z
  .object({ rigId: slugSchema, content: contentInputSchema })
  .meta({ id: 'PreflightRequest' });
export type PreflightRequest = z.infer<typeof preflightRequestSchema>;

export const preflightReportSchema = z
  .object({ faults: z.array(preflightFaultSchema.meta({ id: 'PreflightFault' })) })
  .meta({ id: 'PreflightReport' });
export type PreflightReport = z.infer<typeof preflightReportSchema>;
