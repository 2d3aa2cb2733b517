import { roleSchema, titleSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';
import { accountSchema, passwordSchema } from './account.schema.js';

const rolesSchema = z
  .array(roleSchema)
  .min(1, 'Give at least one role.')
  .refine((roles) => new Set(roles).size === roles.length, 'A role is listed twice: keep one.');

export const userSchema = z
  .object({
    account: z.string(),
    title: z.string(),
    roles: z.array(roleSchema),
    isEnabled: z.boolean(),
    createdAt: z.string(),
  })
  .meta({ id: 'User' });
export type User = z.infer<typeof userSchema>;

export const userPageSchema = pageSchema(userSchema).meta({ id: 'UserPage' });

export const createUserSchema = z
  .object({ account: accountSchema, title: titleSchema, roles: rolesSchema, password: passwordSchema })
  .meta({ id: 'CreateUser' });
export type CreateUser = z.infer<typeof createUserSchema>;

export const changeUserSchema = z
  .object({
    title: titleSchema.optional(),
    roles: rolesSchema.optional(),
    /** A new password ends all sessions of the account. */
    password: passwordSchema.optional(),
    isEnabled: z.boolean().optional(),
  })
  .meta({ id: 'ChangeUser' });
export type ChangeUser = z.infer<typeof changeUserSchema>;
