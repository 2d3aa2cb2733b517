import { z } from 'zod';

export const secondFactorSchema = z
  .object({
    /** True once a first code has shown that the authenticator works. */
    isSetUp: z.boolean(),
    /** True where approving and resetting need it, by the server's setting. */
    isNeededToApprove: z.boolean(),
    recoveryCodesLeft: z.int(),
  })
  .meta({ id: 'SecondFactor' });
export type SecondFactor = z.infer<typeof secondFactorSchema>;

/** Shown this once. */
export const enrolmentSchema = z
  .object({
    /** Base32, in groups of four. */
    secret: z.string(),
    /** `otpauth://` address for authenticators that take one. */
    uri: z.string(),
  })
  .meta({ id: 'SecondFactorEnrolment' });
export type Enrolment = z.infer<typeof enrolmentSchema>;

export const confirmationSchema = z
  .object({ code: z.string().trim().min(1).max(100) })
  .meta({ id: 'SecondFactorConfirmation' });
export type Confirmation = z.infer<typeof confirmationSchema>;

export const recoveryCodesSchema = z
  .object({
    /** Each good once, in place of a code; shown this once. */
    recoveryCodes: z.array(z.string()),
  })
  .meta({ id: 'RecoveryCodes' });
export type RecoveryCodes = z.infer<typeof recoveryCodesSchema>;
