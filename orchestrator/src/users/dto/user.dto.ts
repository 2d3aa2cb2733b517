import { roleSchema, titleSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';
import { accountSchema, passwordSchema } from './account.schema.js';

const rolesSchema = z
  .array(roleSchema)
  .min(1, 'Give at least one role.')
  .refine((roles) => new Set(roles).size === roles.length, 'A role is listed twice: keep one.');

/** The rigs that a role is limited to; an administrator gives rights, so that role has no limit. */
const rigLimitSchema = z.object({
  role: roleSchema.refine(
    (role) => role !== 'administrator',
    'An administrator gives rights, also to himself: this role cannot be limited.',
  ),
  rigs: z.array(z.string().min(1).max(120)).min(1, 'Name at least one rig, or take the role away.').max(500),
});
export type RigLimit = z.infer<typeof rigLimitSchema>;

export const rigLimitsSchema = z
  .array(rigLimitSchema)
  .refine(
    (limits) => new Set(limits.map(({ role }) => role)).size === limits.length,
    'A role has two limits: join them.',
  );

export const userSchema = z
  .object({
    account: z.string(),
    title: z.string(),
    roles: z.array(roleSchema),
    /** Roles that reach the named rigs only; a role that is not listed reaches all. */
    rigLimits: z.array(z.object({ role: roleSchema, rigs: z.array(z.string()) })),
    isEnabled: z.boolean(),
    createdAt: z.string(),
  })
  .meta({ id: 'User' });
export type User = z.infer<typeof userSchema>;

export const userPageSchema = pageSchema(userSchema).meta({ id: 'UserPage' });

export const createUserSchema = z
  .object({
    account: accountSchema,
    title: titleSchema,
    roles: rolesSchema,
    rigLimits: rigLimitsSchema.optional(),
    password: passwordSchema,
  })
  .meta({ id: 'CreateUser' });
export type CreateUser = z.infer<typeof createUserSchema>;

export const changeUserSchema = z
  .object({
    title: titleSchema.optional(),
    roles: rolesSchema.optional(),
    /** Replaces all limits; limits of roles that the account does not have are dropped. */
    rigLimits: rigLimitsSchema.optional(),
    /** A new password ends all sessions of the account. */
    password: passwordSchema.optional(),
    isEnabled: z.boolean().optional(),
  })
  .meta({ id: 'ChangeUser' });
export type ChangeUser = z.infer<typeof changeUserSchema>;

export const resetSecondFactorSchema = z
  .object({
    reason: z.string().trim().min(1, 'Give a reason.').max(500),
    /** Needed where the present password is long enough beside a second factor only. */
    password: passwordSchema.optional(),
  })
  .meta({ id: 'ResetSecondFactor' });
export type ResetSecondFactor = z.infer<typeof resetSecondFactorSchema>;
