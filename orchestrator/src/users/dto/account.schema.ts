import { z } from 'zod';

/** Name that a person signs in with, e.g. `test-engineer`. */
export const accountSchema = z
  .string()
  .trim()
  .toLowerCase()
  .regex(
    /^[a-z0-9][a-z0-9._@-]{0,119}$/,
    'Use letters, digits, ".", "_", "@" and "-", 120 at most, beginning with a letter or digit.',
  );

/** Its strength is judged by the service, so that each fault has its own code. */
export const passwordSchema = z.string().max(1000);
