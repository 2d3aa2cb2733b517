import { createHmac } from 'node:crypto';

const stepS = 30;
const digits = 6;
/** Codes of the step before and after are taken as well: clocks of authenticators are not exact. */
const slackSteps = 1;
const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567';

/** Base32 without padding (RFC 4648, section 6). */
export function toBase32(bytes: Uint8Array): string {
  let bits = 0;
  let value = 0;
  let text = '';
  for (const byte of bytes) {
    value = (value << 8) | byte;
    bits += 8;
    while (bits >= 5) {
      bits -= 5;
      text += alphabet[(value >>> bits) & 31];
    }
    value &= 0xff;
  }
  return bits === 0 ? text : text + alphabet[(value << (5 - bits)) & 31];
}

/**
 * One-time password for a counter (RFC 4226, section 5.3, HMAC-SHA-1).
 *
 * @param length digits of the code
 */
export function hotp(secret: Uint8Array, counter: number, length: number = digits): string {
  const message = Buffer.alloc(8);
  message.writeBigUInt64BE(BigInt(counter));
  const mac = createHmac('sha1', secret).update(message).digest();
  const offset = (mac[mac.length - 1] ?? 0) & 0x0f;
  const number = mac.readUInt32BE(offset) & 0x7fff_ffff;
  return String(number % 10 ** length).padStart(length, '0');
}

/** Number of the time step (RFC 6238, section 4.2). */
export function timeStep(nowMs: number): number {
  return Math.floor(nowMs / 1000 / stepS);
}

/**
 * The time step that a code belongs to; null where it is wrong, too old, or its step was used already.
 *
 * @param lastStep step of the last code that was taken
 */
export function stepOfCode(secret: Uint8Array, code: string, nowMs: number, lastStep: number): number | null {
  const now = timeStep(nowMs);
  let found: number | null = null;
  // Every step is tried, so that the time taken says nothing.
  for (let step = now - slackSteps; step <= now + slackSteps; step += 1) {
    if (step > lastStep && hotp(secret, step) === code) found ??= step;
  }
  return found;
}

/** The address by which authenticators take a secret over. */
export function otpauthUri(account: string, secretBase32: string): string {
  const label = `Cresthold:${encodeURIComponent(account)}`;
  return `otpauth://totp/${label}?secret=${secretBase32}&issuer=Cresthold&algorithm=SHA1&digits=${digits}&period=${stepS}`;
}
