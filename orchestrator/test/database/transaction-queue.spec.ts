import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { DataSource, type EntityManager } from 'typeorm';
import { AuditEntry } from '../../src/audit/entities/audit-entry.entity.js';
import { dataSourceOptions } from '../../src/database/data-source-options.js';
import { TransactionQueue } from '../../src/database/transaction-queue.js';

describe('TransactionQueue', () => {
  let folder: string;
  let database: DataSource;
  let queue: TransactionQueue;

  beforeEach(async () => {
    folder = mkdtempSync(join(tmpdir(), 'cresthold-queue-'));
    database = await new DataSource(dataSourceOptions(folder)).initialize();
    queue = new TransactionQueue(database);
  });
  afterEach(async () => {
    await database.destroy();
    rmSync(folder, { recursive: true, force: true });
  });

  const add = (manager: EntityManager, action: string) =>
    manager.insert(AuditEntry, { at: '', account: 'test', action, previousHash: '', hash: '' });
  const actions = async () => (await database.getRepository(AuditEntry).find()).map((row) => row.action);

  it('runs what was asked for at once in order, each whole', async () => {
    await Promise.all(
      Array.from({ length: 50 }, (_, i) =>
        queue.transaction(async (manager) => {
          await add(manager, `${i}a`);
          await wait(0);
          await add(manager, `${i}b`);
        }),
      ),
    );
    expect(await actions()).toEqual(Array.from({ length: 50 }, (_, i) => [`${i}a`, `${i}b`]).flat());
  });

  it('undoes a transaction that throws and nothing beside it', async () => {
    const outcomes = await Promise.allSettled([
      queue.transaction((manager) => add(manager, 'before')),
      queue.transaction(async (manager) => {
        await add(manager, 'undone');
        await wait(5);
        throw new Error('no');
      }),
      queue.transaction((manager) => add(manager, 'after')),
    ]);
    expect(outcomes.map((outcome) => outcome.status)).toEqual(['fulfilled', 'rejected', 'fulfilled']);
    expect(await actions()).toEqual(['before', 'after']);
  });

  it('joins the transaction that it is asked for in, and goes with it', async () => {
    const whole = queue.transaction(async (manager) => {
      await add(manager, 'outer');
      await queue.transaction((inner) => add(inner, 'inner'));
      throw new Error('no');
    });
    await expect(whole).rejects.toThrow('no');
    expect(await actions()).toEqual([]);
  });

  it('gives what a transaction started and did not wait for a transaction of its own', async () => {
    let left: Promise<void> = Promise.resolve();
    await queue.transaction(async (manager) => {
      await add(manager, 'first');
      left = wait(5).then(() =>
        queue.transaction(async (inner) => {
          await add(inner, 'undone');
          throw new Error('no');
        }),
      );
      left.catch(() => undefined);
    });
    await expect(left).rejects.toThrow('no');
    expect(await actions()).toEqual(['first']);
  });

  it('is drained when all that was asked for is done', async () => {
    void queue.transaction(async (manager) => {
      await wait(5);
      await add(manager, 'last');
    });
    await queue.drain();
    expect(await actions()).toEqual(['last']);
  });
});
