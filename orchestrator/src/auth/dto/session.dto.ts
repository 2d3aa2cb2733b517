import { roleSchema } from '@cresthold/shared';
import { z } from 'zod';

const passwordField = z.string().min(1).max(1000);
/** Six digits of the authenticator, or a recovery code; needed where the account has a second factor. */
const codeField = z.string().trim().min(1).max(100);

export const signInSchema = z
  .object({
    account: z.string().trim().toLowerCase().min(1).max(120),
    password: passwordField,
    code: codeField.optional(),
  })
  .meta({ id: 'SignIn' });
export type SignIn = z.infer<typeof signInSchema>;

/** Who is signed in. */
export const sessionSchema = z
  .object({
    account: z.string(),
    title: z.string(),
    roles: z.array(roleSchema),
    /** Roles that reach the named rigs only; a role that is not listed reaches all. */
    rigLimits: z.array(z.object({ role: roleSchema, rigs: z.array(z.string()) })),
  })
  .meta({ id: 'Session' });
export type Session = z.infer<typeof sessionSchema>;

export const reauthenticationSchema = z
  .object({ password: passwordField, code: codeField.optional() })
  .meta({ id: 'Reauthentication' });
export type Reauthentication = z.infer<typeof reauthenticationSchema>;

export const elevationSchema = z
  .object({
    /** Until when acts that need the password again are taken. */
    until: z.string(),
  })
  .meta({ id: 'Elevation' });
export type Elevation = z.infer<typeof elevationSchema>;

/** One place where an account is signed in. */
export const signedInPlaceSchema = z
  .object({
    id: z.string(),
    /** What the browser or script calls itself. */
    userAgent: z.string(),
    address: z.string(),
    beganAt: z.string(),
    lastSeenAt: z.string(),
    /** True for the session that asks. */
    isThis: z.boolean(),
  })
  .meta({ id: 'SignedInPlace' });
export type SignedInPlace = z.infer<typeof signedInPlaceSchema>;

export const signedInPlacesSchema = z
  .object({ items: z.array(signedInPlaceSchema) })
  .meta({ id: 'SignedInPlaces' });
export type SignedInPlaces = z.infer<typeof signedInPlacesSchema>;

export const passwordChangeSchema = z
  .object({
    password: passwordField,
    code: codeField.optional(),
    newPassword: z.string().max(1000),
  })
  .meta({ id: 'PasswordChange' });
export type PasswordChange = z.infer<typeof passwordChangeSchema>;
