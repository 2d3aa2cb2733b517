import { createHash } from 'node:crypto';
import type { AuditEntry } from './entities/audit-entry.entity.js';

/** What stands before the first entry. */
export const genesisHash = '0'.repeat(64);

/** Everything of an entry that its hash covers. */
export type AuditContent = Omit<AuditEntry, 'hash'>;

/**
 * Hash of an entry: SHA-256 (FIPS 180-4) over all of its fields in a fixed order, the hash of the entry before
 * among them, so that no entry can change, go, come or move without every later hash being wrong.
 *
 * @returns 64 hexadecimal digits
 */
export function hashOf(entry: AuditContent): string {
  const { id, at, account, action, rigId, subject, reason, before, after, previousHash } = entry;
  const fields = [id, at, account, action, rigId, subject, reason, before, after, previousHash];
  return createHash('sha256').update(JSON.stringify(fields)).digest('hex');
}
