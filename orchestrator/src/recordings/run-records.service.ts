import { rmSync } from 'node:fs';
import { Inject, Injectable, Logger } from '@nestjs/common';
import { DomainError, endedStatuses, type RunStatus, type Verdict } from '@cresthold/shared';
import { Subject } from 'rxjs';
import { DataSource, IsNull, LessThan, Not, type FindOptionsWhere } from 'typeorm';
import type { RigCondition } from '../auth/rig-scope.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { RunEntity } from './entities/run.entity.js';
import { runFilePath } from './run-file-paths.js';
import { closeInterrupted, type RunEnd } from './run-file/index.js';
import { RunSealer } from './run-sealer.service.js';

/** A change that people following a run want to see. */
export interface RunChange {
  runId: string;
  rigId: string;
  status: RunStatus;
  verdict: Verdict | null;
}

export interface RunFilter {
  rigId?: RigCondition;
  status?: RunStatus | undefined;
}

/** The rows of runs through their life: opened, followed, ended once, sealed. */
@Injectable()
export class RunRecords {
  readonly changes = new Subject<RunChange>();
  private readonly logger = new Logger(RunRecords.name);

  constructor(
    @Inject(CONFIG) private readonly config: Config,
    private readonly dataSource: DataSource,
    private readonly queue: TransactionQueue,
    private readonly sealer: RunSealer,
  ) {}

  file(runId: string): string {
    return runFilePath(this.config.dataFolder, runId);
  }

  /** The run of a rig that has not ended, or null. */
  openRunOf(rigId: string): Promise<RunEntity | null> {
    return this.dataSource.getRepository(RunEntity).findOneBy({ rigId, endedAt: IsNull() });
  }

  /** @throws run.not-found */
  async get(runId: string): Promise<RunEntity> {
    const run = await this.dataSource.getRepository(RunEntity).findOneBy({ id: runId });
    if (!run) throw new DomainError('run.not-found');
    return run;
  }

  /** The run that a person started with this key, or null. */
  withKey(startedBy: string, idempotencyKey: string): Promise<RunEntity | null> {
    return this.dataSource.getRepository(RunEntity).findOneBy({ startedBy, idempotencyKey });
  }

  /** Newest first, older than the run `beforeId`. */
  list(filter: RunFilter, beforeId: string | null, limit: number): Promise<RunEntity[]> {
    const { rigId, status } = filter;
    const where: FindOptionsWhere<RunEntity> = {};
    if (rigId !== undefined) where.rigId = rigId;
    if (status !== undefined) where.status = status;
    if (beforeId !== null) where.id = LessThan(beforeId);
    return this.dataSource.getRepository(RunEntity).find({ where, order: { id: 'DESC' }, take: limit });
  }

  /** @throws rig.busy where the rig has an open run */
  async open(run: RunEntity): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const other = await manager.findOneBy(RunEntity, { rigId: run.rigId, endedAt: IsNull() });
      if (other) throw busy(other);
      await manager.insert(RunEntity, run);
    });
  }

  /** The host refused to start: there was no run. */
  async withdraw(runId: string): Promise<void> {
    await this.queue.transaction((manager) => manager.delete(RunEntity, { id: runId }));
    for (const suffix of ['', '-wal', '-shm']) rmSync(this.file(runId) + suffix, { force: true });
  }

  /** Follows the life of an open run; a run that has ended stays as it ended. */
  async follow(runId: string, status: RunStatus): Promise<void> {
    if (endedStatuses.includes(status)) return;
    const run = await this.change(runId, { status });
    if (run) this.tell(run);
  }

  /** Ends a run once, at the first call; its file is sealed afterwards, without anybody waiting for it. */
  async end(runId: string, end: RunEnd): Promise<void> {
    const endedAt = new Date().toISOString();
    const run = await this.change(runId, { ...end, endedAt });
    if (!run) return;
    this.tell(run);
    this.sealer.sealSoon(runId, this.file(runId));
  }

  /**
   * Ends a run whose host is gone, as its file says where the host still came to write an end there, else
   * as interrupted at its last sample.
   *
   * @param reason for people: what was lost
   */
  async interrupt(run: RunEntity, reason: string): Promise<void> {
    const end = await closeInterrupted(this.file(run.id), reason).catch((error: unknown): RunEnd => {
      const isExpected = error instanceof DomainError && error.code === 'run.no-samples';
      if (!isExpected) this.logger.error(`Run ${run.id}: its file could not be closed.`, error);
      return { status: 'interrupted', verdict: 'inconclusive', reason, results: {}, scans: 0 };
    });
    await this.end(run.id, end);
  }

  /** Ended runs whose file was not sealed, e.g. because the server died in between. */
  async sealRest(): Promise<void> {
    const runs = this.dataSource.getRepository(RunEntity);
    for (const run of await runs.findBy({ endedAt: Not(IsNull()), fileSha256: IsNull(), scans: Not(0) })) {
      this.sealer.sealSoon(run.id, this.file(run.id));
    }
  }

  /** Resolves when everything that was begun is on disk. */
  async drain(): Promise<void> {
    await this.sealer.drain();
    await this.queue.drain();
  }

  /** @returns the changed row, or null where the run is unknown or has ended */
  private change(runId: string, change: Partial<RunEntity>): Promise<RunEntity | null> {
    return this.queue.transaction(async (manager) => {
      const run = await manager.findOneBy(RunEntity, { id: runId, endedAt: IsNull() });
      if (!run) return null;
      return manager.save(RunEntity, Object.assign(run, change));
    });
  }

  private tell({ id, rigId, status, verdict }: RunEntity): void {
    this.changes.next({ runId: id, rigId, status, verdict });
  }
}

export function busy(run: RunEntity): DomainError {
  const text = `Rig "${run.rigId}" is busy with run ${run.id} until it ends or is stopped.`;
  return new DomainError('rig.busy', text);
}
