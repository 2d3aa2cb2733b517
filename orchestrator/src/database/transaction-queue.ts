import { AsyncLocalStorage } from 'node:async_hooks';
import { Injectable } from '@nestjs/common';
import { DataSource, type EntityManager } from 'typeorm';

/** A transaction that is going on. */
interface OpenTransaction {
  readonly manager: EntityManager;
  /** False once it has ended: what it started and did not wait for must not write through it any more. */
  isOpen: boolean;
}

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
  private readonly current = new AsyncLocalStorage<OpenTransaction>();

  constructor(private readonly dataSource: DataSource) {}

  /**
   * Runs `work` in a transaction of its own, after everything asked for before; rolled back when it throws.
   * Inside another `transaction` it joins that one, so that services can be composed.
   */
  transaction<T>(work: (manager: EntityManager) => Promise<T>): Promise<T> {
    const outer = this.current.getStore();
    if (outer?.isOpen === true) return work(outer.manager);
    const result = this.tail.then(() => this.dataSource.transaction((manager) => this.runIn(manager, work)));
    this.tail = result.catch(() => undefined);
    return result;
  }

  private async runIn<T>(manager: EntityManager, work: (manager: EntityManager) => Promise<T>): Promise<T> {
    const transaction: OpenTransaction = { manager, isOpen: true };
    try {
      return await this.current.run(transaction, () => work(manager));
    } finally {
      transaction.isOpen = false;
    }
  }

  /** Resolves when everything asked for so far is done. */
  async drain(): Promise<void> {
    await this.tail;
  }
}
