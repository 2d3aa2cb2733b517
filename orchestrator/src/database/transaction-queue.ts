import { AsyncLocalStorage } from 'node:async_hooks';
import { Injectable } from '@nestjs/common';
import { DataSource, type EntityManager } from 'typeorm';

/**
 * The one queue of everything that writes to the main database. TypeORM has a single connection to SQLite:
 * transactions that overlap break each other, and a write beside an open transaction joins it and is lost
 * with its rollback. So nobody writes but through here.
 *
 * Reads may go past the queue; a decision that a write rests on is read inside the same transaction.
 */
@Injectable()
export class TransactionQueue {
  private tail: Promise<unknown> = Promise.resolve();
  private readonly current = new AsyncLocalStorage<EntityManager>();

  constructor(private readonly dataSource: DataSource) {}

  /**
   * Runs `work` in a transaction of its own, after everything asked for before; rolled back when it throws.
   * Inside another `transaction` it joins that one, so that services can be composed.
   */
  transaction<T>(work: (manager: EntityManager) => Promise<T>): Promise<T> {
    const outer = this.current.getStore();
    if (outer !== undefined) return work(outer);
    const result = this.tail.then(() =>
      this.dataSource.transaction((manager) => this.current.run(manager, () => work(manager))),
    );
    this.tail = result.catch(() => undefined);
    return result;
  }

  /** Resolves when everything asked for so far is done. */
  async drain(): Promise<void> {
    await this.tail;
  }
}
