import { setTimeout as sleep } from 'node:timers/promises';
import { Injectable, Logger } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { sealAction } from '../audit/verify-audit.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { RunEntity } from './entities/run.entity.js';
import { sealFile } from './run-file/index.js';

const attemptsMax = 20;
const attemptEveryMs = 250;

/** Seals the files of ended runs: from then on any change of a byte shows. */
@Injectable()
export class RunSealer {
  private readonly logger = new Logger(RunSealer.name);

  private tail: Promise<void> = Promise.resolve();

  constructor(
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** Seals when the files asked for before are done. */
  sealSoon(runId: string, file: string): void {
    this.tail = this.tail.then(() => this.seal(runId, file));
  }

  /** Resolves when everything asked for so far is sealed or given up. */
  async drain(): Promise<void> {
    await this.tail;
  }

  /**
   * Puts the SHA-256 of a file into the run's row. A file that is still being read is tried again for a
   * while; what stays open is sealed at the next start of the server.
   */
  private async seal(runId: string, file: string): Promise<void> {
    for (let attempt = 1; attempt <= attemptsMax; attempt++) {
      try {
        await this.keep(runId, await sealFile(file));
        return;
      } catch (error) {
        if (error instanceof DomainError && error.code === 'run.no-samples') return;
        if (attempt < attemptsMax) await sleep(attemptEveryMs);
        else this.logger.warn(`The file of run ${runId} is not sealed yet.`, error);
      }
    }
  }

  /** In the run's row and, in the same transaction, in the audit chain. */
  private async keep(runId: string, fileSha256: string): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const run = await manager.findOneByOrFail(RunEntity, { id: runId });
      await manager.update(RunEntity, { id: runId }, { fileSha256 });
      const { rigId } = run;
      const act = { account: 'server', action: sealAction, rigId, subject: runId };
      await this.audit.record({ ...act, after: { sha256: fileSha256 } });
    });
  }
}
