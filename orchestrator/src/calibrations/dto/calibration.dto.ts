import { calibrationContentSchema, channelIdSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageQuerySchema, pageSchema } from '../../paging/page.js';

export const calibrationStatusSchema = z.enum(['in-force', 'superseded', 'withdrawn']);
export type CalibrationStatus = z.infer<typeof calibrationStatusSchema>;

/** How near its end a calibration is: `due-soon` within 30 days. */
export const dueStateSchema = z.enum(['current', 'due-soon', 'overdue']);
export type DueState = z.infer<typeof dueStateSchema>;

export const certificateFileSchema = z
  .object({ mediaType: z.string(), sha256: z.string(), bytes: z.int() })
  .meta({ id: 'CalibrationCertificate' });
export type CertificateFile = z.infer<typeof certificateFileSchema>;

export const calibrationSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    channel: channelIdSchema,
    version: z.int(),
    status: calibrationStatusSchema,
    author: z.string(),
    createdAt: z.string(),
    endedAt: z.string().nullable(),
    content: calibrationContentSchema.meta({ id: 'CalibrationContent' }),
    /** Null where no certificate was uploaded. */
    certificateFile: certificateFileSchema.nullable(),
    dueState: dueStateSchema,
  })
  .meta({ id: 'Calibration' });
export type Calibration = z.infer<typeof calibrationSchema>;

export const calibrationPageSchema = pageSchema(calibrationSchema).meta({ id: 'CalibrationPage' });

export const calibrationQuerySchema = pageQuerySchema.extend({
  /** Only calibrations of this sensor. */
  channel: channelIdSchema.optional(),
  status: calibrationStatusSchema.optional(),
});
export type CalibrationQuery = z.infer<typeof calibrationQuerySchema>;

export const newCalibrationSchema = z
  .object({
    channel: channelIdSchema,
    content: calibrationContentSchema.meta({ id: 'CalibrationContentInput' }),
  })
  .meta({ id: 'NewCalibration' });
export type NewCalibration = z.infer<typeof newCalibrationSchema>;

export const calibrationWithdrawalSchema = z
  .object({ reason: z.string().trim().min(1, 'Give a reason.').max(500) })
  .meta({ id: 'CalibrationWithdrawal' });
export type CalibrationWithdrawal = z.infer<typeof calibrationWithdrawalSchema>;
