import { MoreThan, Not, IsNull, type DataSource } from 'typeorm';
import { RunEntity } from '../recordings/entities/run.entity.js';
import { genesisHash, hashOf } from './audit-chain.js';
import type { AuditVerification } from './dto/audit.dto.js';
import { AuditEntry } from './entities/audit-entry.entity.js';

const batchSize = 1000;
/** Action under which a run's seal is kept. */
export const sealAction = 'run.sealed';

type Break = NonNullable<AuditVerification['firstBreak']>;

/**
 * Recomputes the chain from its first entry, compares its length with what the database has ever given out, and
 * the seals of runs with those that the chain keeps.
 */
export async function verifyAudit(database: DataSource): Promise<AuditVerification> {
  const entries = database.getRepository(AuditEntry);
  const seals = new Map<string, string>();
  let previousHash = genesisHash;
  let count = 0;
  let firstBreak: Break | null = null;
  for (;;) {
    const batch = await entries.find({
      where: { id: MoreThan(count) },
      order: { id: 'ASC' },
      take: batchSize,
    });
    for (const entry of batch) {
      const what = breakOf(entry, count + 1, previousHash);
      if (what !== null) {
        firstBreak = { id: count + 1, what };
        break;
      }
      if (entry.action === sealAction && entry.subject !== null) seals.set(entry.subject, entry.after ?? '');
      previousHash = entry.hash;
      count += 1;
    }
    if (firstBreak !== null || batch.length < batchSize) break;
  }
  firstBreak ??= await shortfall(database, count);
  const badSeals = firstBreak === null ? await strayedSeals(database, seals) : [];
  return {
    isIntact: firstBreak === null && badSeals.length === 0,
    entries: count,
    headHash: previousHash,
    firstBreak,
    badSeals,
  };
}

function breakOf(entry: AuditEntry, expectedId: number, previousHash: string): string | null {
  if (entry.id !== expectedId) return `Entry ${expectedId} is missing.`;
  if (entry.previousHash !== previousHash) return 'It does not follow the entry before it.';
  if (entry.hash !== hashOf(entry)) return 'Its content is not what was written.';
  return null;
}

/** Entries cut off at the end leave the chain whole, but not SQLite's count of ids given out. */
async function shortfall(database: DataSource, count: number): Promise<Break | null> {
  const rows: { seq: number }[] = await database.query(
    `SELECT seq FROM sqlite_sequence WHERE name = 'audit'`,
  );
  const given = rows[0]?.seq ?? 0;
  return given > count ? { id: count + 1, what: `Entries ${count + 1} to ${given} are missing.` } : null;
}

/** Runs whose seal is not the one that the chain keeps. */
async function strayedSeals(database: DataSource, seals: ReadonlyMap<string, string>): Promise<string[]> {
  const runs = await database.getRepository(RunEntity).find({
    where: { fileSha256: Not(IsNull()) },
    select: { id: true, fileSha256: true },
  });
  return runs
    .filter(({ id, fileSha256 }) => seals.get(id) !== JSON.stringify({ sha256: fileSha256 }))
    .map(({ id }) => id);
}
