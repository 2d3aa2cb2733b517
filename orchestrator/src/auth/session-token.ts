import { createHash, randomBytes } from 'node:crypto';

const tokenBytes = 32;

/** A new token of 256 random bits, for a browser alone. */
export function newToken(): string {
  return randomBytes(tokenBytes).toString('base64url');
}

/** What the server keeps of a token: SHA-256, hex. A secret of so many random bits needs no salt. */
export function hashOfToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}
