import { titleSchema } from '@cresthold/shared';
import { z } from 'zod';
import { accountSchema, passwordSchema } from '../../users/dto/account.schema.js';

export const setupStateSchema = z
  .object({
    /** True until the first administrator exists. */
    isNeeded: z.boolean(),
  })
  .meta({ id: 'SetupState' });
export type SetupState = z.infer<typeof setupStateSchema>;

export const setupSchema = z
  .object({
    /** The one-time code that the server printed at its start. */
    code: z.string().trim().min(1).max(100),
    account: accountSchema,
    title: titleSchema,
    password: passwordSchema,
  })
  .meta({ id: 'Setup' });
export type Setup = z.infer<typeof setupSchema>;
