import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { DataSource } from 'typeorm';
import { AuditService } from '../../src/audit/audit.service.js';
import { verifyAudit } from '../../src/audit/verify-audit.js';
import { dataSourceOptions } from '../../src/database/data-source-options.js';
import { migrations } from '../../src/database/migrations/index.js';
import { TransactionQueue } from '../../src/database/transaction-queue.js';

/** Trials of the long suite are those that a record is held to. */
const trials = process.env['CRESTHOLD_LONG'] ? 1000 : 60;
const columns = [
  'at',
  'account',
  'action',
  'rigId',
  'subject',
  'reason',
  'before',
  'after',
  'previousHash',
  'hash',
];

describe('the audit chain', () => {
  let folder: string;
  let database: DataSource;

  beforeEach(async () => {
    folder = mkdtempSync(join(tmpdir(), 'cresthold-audit-'));
    database = await new DataSource(dataSourceOptions(folder)).initialize();
    const audit = new AuditService(new TransactionQueue(database));
    for (let i = 0; i < 40; i += 1) {
      const act = { account: `person-${i % 3}`, action: 'rig.changed', rigId: 'kiln-1', subject: `${i}` };
      await audit.record({ ...act, reason: `revision ${i}`, before: { value: i }, after: { value: i + 1 } });
    }
  });
  afterEach(async () => {
    await database.destroy();
    rmSync(folder, { recursive: true, force: true });
  });

  const withoutGuards = async (work: () => Promise<unknown>) => {
    for (const act of ['update', 'delete']) await database.query(`DROP TRIGGER "audit_no_${act}"`);
    await work();
  };

  it('is intact as written, and long', async () => {
    const found = await verifyAudit(database);
    expect(found).toMatchObject({ isIntact: true, entries: 40, firstBreak: null, badSeals: [] });
    expect(found.headHash).toMatch(/^[0-9a-f]{64}$/);
  });

  it('is guarded by the database itself', async () => {
    await expect(database.query(`UPDATE "audit" SET "reason" = 'x'`)).rejects.toThrow('append-only');
    await expect(database.query('DELETE FROM "audit" WHERE "id" = 40')).rejects.toThrow('append-only');
  });

  it(`shows a change of any one byte, in ${trials} trials`, async () => {
    await withoutGuards(async () => {
      for (let trial = 0; trial < trials; trial += 1) {
        // A fixed sequence that still goes through every column, row and place: trials can be repeated.
        const column = columns[trial % columns.length] ?? 'at';
        const id = 1 + ((trial * 7) % 40);
        const [row] = await database.query(`SELECT "${column}" AS value FROM "audit" WHERE "id" = ?`, [id]);
        const bytes = Buffer.from(String(row.value));
        const at = (trial * 13) % bytes.length;
        bytes[at] = (bytes[at] ?? 0) ^ (1 << (trial % 7));
        const put = (value: unknown) =>
          database.query(`UPDATE "audit" SET "${column}" = ? WHERE "id" = ?`, [value, id]);
        await put(bytes.toString('latin1'));
        const { isIntact, firstBreak } = await verifyAudit(database);
        expect([column, isIntact, firstBreak?.id]).toEqual([column, false, id]);
        await put(row.value);
      }
    });
    expect((await verifyAudit(database)).isIntact).toBe(true);
  });

  it.each([
    ['in the middle', 20, 20],
    ['at the beginning', 1, 1],
    ['at the end', 40, 40],
  ])('shows an entry taken out %s', async (_where, id, at) => {
    await withoutGuards(() => database.query('DELETE FROM "audit" WHERE "id" = ?', [id]));
    expect((await verifyAudit(database)).firstBreak?.id).toBe(at);
  });

  it('shows entries that changed places', async () => {
    await withoutGuards(async () => {
      for (const [from, to] of [
        [10, 1000],
        [11, 10],
        [1000, 11],
      ]) {
        await database.query('UPDATE "audit" SET "id" = ? WHERE "id" = ?', [to, from]);
      }
    });
    expect((await verifyAudit(database)).firstBreak?.id).toBe(10);
  });

  it('chains the entries of a database from before it, and anchors seals made then', async () => {
    await database.destroy();
    rmSync(folder, { recursive: true, force: true });
    folder = mkdtempSync(join(tmpdir(), 'cresthold-audit-'));
    const old = migrations.filter(({ name }) => !name.startsWith('AuditChain'));
    const before = { ...dataSourceOptions(folder), migrations: old };
    database = await new DataSource(before).initialize();
    const insert = `INSERT INTO "audit" ("at", "account", "action", "rigId", "subject", "reason") VALUES (?, ?, ?, ?, ?, ?)`;
    await database.query(insert, [
      '2026-01-01T00:00:00.000Z',
      'engineer',
      'rig.created',
      'kiln-1',
      null,
      null,
    ]);
    const now = '2026-01-01T00:00:00.000Z';
    await database.query(`INSERT INTO "rig" VALUES ('kiln-1', 1, '{}', '${now}', '${now}')`);
    await database.query(
      `INSERT INTO "run" VALUES ('run-1', 'kiln-1', 'e', 1, 'E', 1, 'finished', 'pass', NULL, '${now}', '${now}',
        'engineer', 10, '{}', '[]', 'abc', NULL)`,
    );
    await database.destroy();
    database = await new DataSource(dataSourceOptions(folder)).initialize();
    expect(await verifyAudit(database)).toMatchObject({ isIntact: true, entries: 2 });
    await database.query(`UPDATE "run" SET "fileSha256" = 'abd' WHERE "id" = 'run-1'`);
    expect(await verifyAudit(database)).toMatchObject({ isIntact: false, badSeals: ['run-1'] });
  });

  it('is verified by a command beside a running server', async () => {
    const program = join(process.cwd(), 'dist/verify-audit.js');
    const verify = () =>
      promisify(execFile)(process.execPath, [program], { env: { ...process.env, CRESTHOLD_DATA: folder } });
    expect((await verify()).stdout).toContain('The audit log is intact.');
    await withoutGuards(() => database.query(`UPDATE "audit" SET "account" = 'nobody' WHERE "id" = 7`));
    await expect(verify()).rejects.toMatchObject({
      code: 1,
      stdout: expect.stringContaining('The chain breaks at entry 7'),
    });
  });
});
