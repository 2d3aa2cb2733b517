import { createHmac } from 'node:crypto';
import { compare, hash } from 'bcryptjs';

const cost = 11;

/**
 * bcrypt looks at 72 bytes only and stops at a zero byte, so it is given a digest of fixed length instead
 * of the password. The key keeps digests from lists of plain SHA-256 sums from being tried as they are.
 */
function digest(password: string): string {
  return createHmac('sha256', 'cresthold password 1').update(password.normalize('NFKC')).digest('base64');
}

export function hashPassword(password: string): Promise<string> {
  return hash(digest(password), cost);
}

export function isPasswordOf(password: string, passwordHash: string): Promise<boolean> {
  return compare(digest(password), passwordHash);
}

let decoy: Promise<string> | undefined;

/** A hash that fits no password, to spend the same time on an unknown account. */
export function decoyHash(): Promise<string> {
  decoy ??= hash('no password has this digest', cost);
  return decoy;
}
