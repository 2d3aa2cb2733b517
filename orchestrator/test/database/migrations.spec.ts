import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { DataSource } from 'typeorm';
import { dataSourceOptions } from '../../src/database/data-source-options.js';

describe('the database', () => {
  let folder: string;
  let database: DataSource;

  beforeEach(async () => {
    folder = mkdtempSync(join(tmpdir(), 'cresthold-database-'));
    database = await new DataSource(dataSourceOptions(folder)).initialize();
  });
  afterEach(async () => {
    if (database.isInitialized) await database.destroy();
    rmSync(folder, { recursive: true, force: true });
  });

  const drift = async () => (await database.driver.createSchemaBuilder().log()).upQueries.map((q) => q.query);

  it('is migrated from nothing to exactly what the entities say', async () => {
    expect(await database.showMigrations()).toBe(false);
    expect(await drift()).toEqual([]);
  });

  it('notices a difference, so that the check above can fail', async () => {
    await database.query('ALTER TABLE "objective" ADD COLUMN "stray" text');
    expect(await drift()).not.toEqual([]);
  });

  it('is opened a second time without a change', async () => {
    const count = async () => database.query('SELECT count(*) AS n FROM migrations');
    const before = await count();
    await database.destroy();
    database = await new DataSource(dataSourceOptions(folder)).initialize();
    expect(await count()).toEqual(before);
  });

  it('goes all the way back and up again', async () => {
    const names = async () =>
      (await database.query(`SELECT name FROM sqlite_master WHERE type = 'table' ORDER BY name`)).map(
        (row: { name: string }) => row.name,
      );
    const before = await names();
    for (let i = database.migrations.length; i > 0; i -= 1) await database.undoLastMigration();
    expect(await names()).toEqual(['migrations', 'sqlite_sequence']);
    await database.runMigrations();
    expect(await names()).toEqual(before);
    expect(await drift()).toEqual([]);
  });

  it('writes ahead, waits for locks, keeps what it committed and holds foreign keys', async () => {
    const pragma = async (name: string) => Object.values((await database.query(`PRAGMA ${name}`))[0])[0];
    expect(await pragma('journal_mode')).toBe('wal');
    expect(await pragma('foreign_keys')).toBe(1);
    expect(await pragma('busy_timeout')).toBe(5000);
    expect(await pragma('synchronous')).toBe(2);
    const orphan = `INSERT INTO rig_state ("rigId") VALUES ('nowhere')`;
    await expect(database.query(orphan)).rejects.toThrow('FOREIGN KEY');
  });
});
