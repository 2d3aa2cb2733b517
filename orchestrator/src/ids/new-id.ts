import { randomBytes } from 'node:crypto';

/**
 * A new identifier whose order is the order of creation: UUID version 7 (RFC 9562, section 5.7), so that
 * lists can be paged by it.
 *
 * @param nowMs milliseconds since 1970
 */
export function newId(nowMs: number = Date.now()): string {
  const bytes = randomBytes(16);
  bytes.writeUIntBE(nextTimestamp(nowMs), 0, 6);
  bytes[6] = 0x70 | ((bytes[6] ?? 0) & 0x0f);
  bytes[8] = 0x80 | ((bytes[8] ?? 0) & 0x3f);
  const hex = bytes.toString('hex');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}

let lastMs = 0;

/** Two ids of one millisecond would have random order: the later one takes the next millisecond. */
function nextTimestamp(nowMs: number): number {
  lastMs = Math.max(nowMs, lastMs + 1);
  return lastMs;
}
