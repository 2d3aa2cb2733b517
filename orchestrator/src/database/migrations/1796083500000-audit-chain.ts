import type { MigrationInterface, QueryRunner } from 'typeorm';
import { genesisHash, hashOf } from '../../audit/audit-chain.js';

interface OldEntry {
  id: number;
  at: string;
  account: string;
  action: string;
  rigId: string | null;
  subject: string | null;
  reason: string | null;
}

const appendOnly = ['UPDATE', 'DELETE'].map(
  (act) => `CREATE TRIGGER "audit_no_${act.toLowerCase()}" BEFORE ${act} ON "audit"
    BEGIN SELECT RAISE(ABORT, 'the audit log is append-only'); END`,
);
const oldColumns = '"id", "at", "account", "action", "rigId", "subject", "reason"';

/** Chains the entries of the audit log by their hashes, those that are there already as well. */
export class AuditChain1796083500000 implements MigrationInterface {
  name = 'AuditChain1796083500000';

  async up(runner: QueryRunner): Promise<void> {
    const entries = (await runner.query(`SELECT ${oldColumns} FROM "audit" ORDER BY "id"`)) as OldEntry[];
    await this.replaceTable(
      runner,
      `"before" text, "after" text, "previousHash" text NOT NULL, "hash" text NOT NULL`,
    );
    let previousHash = genesisHash;
    for (const [index, entry] of entries.entries()) {
      const content = { ...entry, id: index + 1, before: null, after: null, previousHash };
      const { id, at, account, action, rigId, subject, reason } = content;
      const hash = hashOf(content);
      await runner.query(
        `INSERT INTO "audit" (${oldColumns}, "before", "after", "previousHash", "hash")
          VALUES (?, ?, ?, ?, ?, ?, ?, NULL, NULL, ?, ?)`,
        [id, at, account, action, rigId, subject, reason, previousHash, hash],
      );
      previousHash = hash;
    }
    // Runs that were sealed before the chain was there are anchored in it now.
    await this.anchorSeals(runner, entries.length, previousHash);
    for (const trigger of appendOnly) await runner.query(trigger);
  }

  async down(runner: QueryRunner): Promise<void> {
    const rows = (await runner.query(`SELECT ${oldColumns} FROM "audit" ORDER BY "id"`)) as OldEntry[];
    await this.replaceTable(runner, null);
    for (const { id, at, account, action, rigId, subject, reason } of rows) {
      const values = [id, at, account, action, rigId, subject, reason];
      await runner.query(`INSERT INTO "audit" (${oldColumns}) VALUES (?, ?, ?, ?, ?, ?, ?)`, values);
    }
    for (const trigger of appendOnly) await runner.query(trigger);
  }

  private async replaceTable(runner: QueryRunner, added: string | null): Promise<void> {
    await runner.query('DROP TABLE "audit"');
    await runner.query(`CREATE TABLE "audit" ("id" integer PRIMARY KEY AUTOINCREMENT NOT NULL, "at" text NOT NULL,
      "account" text NOT NULL, "action" text NOT NULL, "rigId" text, "subject" text,
      "reason" text${added === null ? '' : `, ${added}`})`);
    await runner.query('CREATE INDEX "audit_by_rig" ON "audit" ("rigId")');
  }

  private async anchorSeals(runner: QueryRunner, count: number, head: string): Promise<void> {
    const runs = (await runner.query(
      'SELECT "id", "rigId", "fileSha256" FROM "run" WHERE "fileSha256" IS NOT NULL ORDER BY "id"',
    )) as { id: string; rigId: string; fileSha256: string }[];
    let previousHash = head;
    for (const [index, run] of runs.entries()) {
      const content = {
        id: count + index + 1,
        at: new Date().toISOString(),
        account: 'server',
        action: 'run.sealed',
        rigId: run.rigId,
        subject: run.id,
        reason: null,
        before: null,
        after: JSON.stringify({ sha256: run.fileSha256 }),
        previousHash,
      };
      const hash = hashOf(content);
      const { id, at, account, action, rigId, subject, after } = content;
      await runner.query(
        `INSERT INTO "audit" (${oldColumns}, "before", "after", "previousHash", "hash")
          VALUES (?, ?, ?, ?, ?, ?, NULL, NULL, ?, ?, ?)`,
        [id, at, account, action, rigId, subject, after, previousHash, hash],
      );
      previousHash = hash;
    }
  }
}
