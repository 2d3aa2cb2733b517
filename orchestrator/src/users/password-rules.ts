import { DomainError } from '@cresthold/shared';
import { commonPasswords } from './common-passwords.js';

/** Least length where the password is the only factor (NIST SP 800-63B-4, section 3.1.1.2). */
export const minLengthAlone = 15;
/** Least length beside a second factor (same section). */
export const minLengthBesideFactor = 8;
const maxLength = 256;
/** Words shorter than this are part of too many good passwords. */
const contextWordMin = 4;
/** Characters that must be left when context words, digits and signs are taken away. */
const ownLettersMin = 4;
const distinctMin = 5;

/** What a new password is judged by. */
export interface PasswordContext {
  account: string;
  /** Title of the account, names of station and product: nothing of it makes a password. */
  words: readonly string[];
  hasSecondFactor: boolean;
}

/** Least number of characters. */
export function minLengthOf({ hasSecondFactor }: Pick<PasswordContext, 'hasSecondFactor'>): number {
  return hasSecondFactor ? minLengthBesideFactor : minLengthAlone;
}

/** Code points after the normalisation that the hash is made of. */
export function lengthOf(password: string): number {
  return [...password.normalize('NFKC')].length;
}

/**
 * Judges a new password by length, by a list of those that guessers try first and by words that belong to
 * the account (NIST SP 800-63B-4, section 3.1.1.2). Rules of composition and of regular change are left out
 * on purpose, as that text demands.
 *
 * @throws user.weak-password
 */
export function checkNewPassword(password: string, context: PasswordContext, field = 'password'): void {
  const fault = passwordFault(password, context);
  if (fault !== null) throw new DomainError('user.weak-password', undefined, [{ field, message: fault }]);
}

function passwordFault(password: string, context: PasswordContext): string | null {
  const length = lengthOf(password);
  const min = minLengthOf(context);
  if (length < min) return `Use at least ${min} characters: a few words that do not belong together will do.`;
  if (length > maxLength) return `Use at most ${maxLength} characters.`;
  const plain = password.normalize('NFKC').toLowerCase();
  if (isPattern(plain)) return 'The password must not be a few characters over and over, or a sequence.';
  if (isCommon(plain)) return 'This password is built on one of the first that guessers try.';
  if (isOfContext(plain, context)) return 'Do not build the password from the account or the names here.';
  return null;
}

/** Few different characters, or nearly each one follows from the one before, as in `123456789abcdefgh`. */
function isPattern(plain: string): boolean {
  const codes = [...plain].map((character) => character.codePointAt(0) ?? 0);
  if (new Set(codes).size < distinctMin) return true;
  const steps = codes.slice(1).map((code, index) => Math.abs(code - (codes[index] ?? 0)));
  return steps.filter((step) => step <= 1).length > 0.75 * steps.length;
}

/** The password itself, without what is put before and after, or the part that it repeats. */
function isCommon(plain: string): boolean {
  const core = plain.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '');
  const unit = /^(.{4,}?)\1+$/u.exec(plain)?.[1] ?? plain;
  return [plain, core, unit].some((text) => commonPasswords.has(text));
}

function isOfContext(plain: string, { account, words }: PasswordContext): boolean {
  const parts = [account, ...words, 'cresthold']
    .flatMap((text) => [text, ...text.split(/[^\p{L}\p{N}]+/u)])
    .map((text) => text.normalize('NFKC').toLowerCase())
    .filter((text) => [...text].length >= contextWordMin)
    .sort((a, b) => b.length - a.length);
  const rest = parts.reduce((text, part) => text.replaceAll(part, ''), plain);
  const own = rest.replace(/[^\p{L}]/gu, '');
  return rest !== plain && [...own].length < ownLettersMin;
}
