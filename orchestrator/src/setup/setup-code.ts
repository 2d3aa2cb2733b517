import { createHash, randomInt, timingSafeEqual } from 'node:crypto';

/** No letter or digit that looks like another one. */
const alphabet = 'ABCDEFGHJKMNPQRSTUVWXYZ23456789';
const groups = 4;
const groupLength = 5;

/** A code of 20 characters, about 99 bits, in groups that can be read aloud. */
export function newSetupCode(): string {
  const group = () =>
    Array.from({ length: groupLength }, () => alphabet[randomInt(alphabet.length)]).join('');
  return Array.from({ length: groups }, group).join('-');
}

/** Compares in constant time; case and hyphens do not matter. */
export function isSameCode(given: string, expected: string): boolean {
  const digest = (code: string) =>
    createHash('sha256').update(code.toUpperCase().replace(/[\s-]/g, '')).digest();
  return timingSafeEqual(digest(given), digest(expected));
}
