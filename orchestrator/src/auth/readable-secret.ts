import { createHash, randomInt, timingSafeEqual } from 'node:crypto';

/** No letter or digit that looks like another one. */
const alphabet = 'ABCDEFGHJKMNPQRSTUVWXYZ23456789';
const groupLength = 5;

/** A random secret in groups of five that can be read aloud; each group adds almost 25 bits. */
export function readableSecret(groups: number): string {
  const group = () =>
    Array.from({ length: groupLength }, () => alphabet[randomInt(alphabet.length)]).join('');
  return Array.from({ length: groups }, group).join('-');
}

/** Compares in constant time; case, spaces and hyphens do not matter. */
export function isSameSecret(given: string, expected: string): boolean {
  const digest = (secret: string) =>
    createHash('sha256').update(secret.toUpperCase().replace(/[\s-]/g, '')).digest();
  return timingSafeEqual(digest(given), digest(expected));
}
