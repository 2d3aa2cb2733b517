import { z } from 'zod';
import { unescapeText } from './escaped-text.js';

const escapes =
  'Write \\r for CR, \\n for LF, \\t for tab, \\x1B for any other character, \\\\ for a backslash.';

/** A text in which characters that cannot be typed are written as escapes. */
export function escapedTextSchema(mostChars: number): z.ZodString {
  return z
    .string()
    .max(mostChars, `At most ${mostChars} characters.`)
    .refine((text) => unescapeText(text) !== null, escapes)
    .refine((text) => /^[\x20-\xff]*$/.test(text), 'Write control characters as escapes, e.g. \\r.');
}

/** A command, with escapes and placeholders. */
export const commandSchema = escapedTextSchema(500);

export const terminatorSchema = escapedTextSchema(20).refine(
  (text) => text !== '',
  'Give at least one character.',
);

export const patternSchema = z
  .string()
  .min(1, 'Give a pattern: * stands for any text, ? for any one character.')
  .max(120, 'At most 120 characters.');

export const patternListSchema = z.array(patternSchema).max(20, 'At most 20 patterns.');

/** Empty for none. */
export const optionalPatternSchema = z.string().max(120, 'At most 120 characters.');
