import { z } from 'zod';

/**
 * The name of a channel in expressions, records and the API: a letter, then letters and digits
 * (`airTrim`, `o2`), at most 40 characters. It is also a column name of a run file.
 */
export const channelIdSchema = z
  .string()
  .regex(/^[a-z][a-zA-Z0-9]{0,39}$/, 'Use a lower-case letter, then letters and digits, 40 at most.');

/** The name of a rig, a connection, a step or an interlock: `burner-1`; at most 40 characters. */
export const slugSchema = z
  .string()
  .regex(
    /^[a-z][a-z0-9-]{0,39}$/,
    'Use a lower-case letter, then lower-case letters, digits and hyphens, 40 at most.',
  );

export const titleSchema = z.string().trim().min(1, 'Give a title.').max(120, 'At most 120 characters.');
