import { roleSchema } from '@cresthold/shared';
import { z } from 'zod';

export const signInSchema = z
  .object({ account: z.string().trim().toLowerCase().min(1).max(120), password: z.string().min(1).max(1000) })
  .meta({ id: 'SignIn' });
export type SignIn = z.infer<typeof signInSchema>;

/** Who is signed in. */
export const sessionSchema = z
  .object({ account: z.string(), title: z.string(), roles: z.array(roleSchema) })
  .meta({ id: 'Session' });
export type Session = z.infer<typeof sessionSchema>;
