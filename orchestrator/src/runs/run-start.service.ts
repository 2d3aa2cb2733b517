import { Injectable } from '@nestjs/common';
import { DomainError, type RunOrder } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { newId } from '../ids/new-id.js';
import type { RunEntity } from '../recordings/entities/run.entity.js';
import { ProofTestDues } from '../proof-tests/proof-test-dues.service.js';
import { RunRecords } from '../recordings/run-records.service.js';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';
import type { RunStart } from './dto/run.dto.js';
import { RunOrders, type PreparedRun } from './run-orders.service.js';

/** Starts runs. A start that is refused leaves nothing behind. */
@Injectable()
export class RunStarter {
  constructor(
    private readonly orders: RunOrders,
    private readonly records: RunRecords,
    private readonly hosts: RigHostsService,
    private readonly audit: AuditService,
    private readonly proofTests: ProofTestDues,
  ) {}

  /**
   * @param idempotencyKey the same key of the same person never starts a second run; null where none is given
   * @throws experiment.preflight-failed, rig.busy, rig.not-armed and whatever else the rig's host answers
   */
  async start(request: RunStart, idempotencyKey: string | null, by: string): Promise<RunEntity> {
    const earlier = await this.withKey(by, idempotencyKey);
    if (earlier) return sameRequest(earlier, request);
    const prepared = await this.orders.prepare(request);
    // A rig that is armed for its proof tests runs nothing until they are done.
    await this.proofTests.requireInDate(prepared.rigId);
    const run = newRun(prepared, idempotencyKey, by);
    try {
      await this.records.open(run);
    } catch (error) {
      // The same request may have come twice at once.
      const twin = await this.withKey(by, idempotencyKey);
      if (twin) return sameRequest(twin, request);
      throw error;
    }
    await this.order(run, prepared);
    const { id: subject, rigId } = run;
    await this.audit.record({ account: by, action: 'run.started', rigId, subject });
    return this.records.get(run.id);
  }

  private async withKey(by: string, key: string | null): Promise<RunEntity | null> {
    return key === null ? null : this.records.withKey(by, key);
  }

  private async order(run: RunEntity, prepared: PreparedRun): Promise<void> {
    const order = toOrder(run, prepared, this.records.file(run.id));
    try {
      await this.hosts.command(run.rigId, { type: 'start-run', order });
    } catch (error) {
      // Without an answer the run may well go on: then the host's next words, or its end, decide.
      const isUnknown = error instanceof DomainError && error.code === 'host.timeout';
      if (!isUnknown) await this.records.withdraw(run.id);
      throw error;
    }
  }
}

function sameRequest(run: RunEntity, { experimentId, version }: RunStart): RunEntity {
  const isSame =
    run.experimentId === experimentId && (version === undefined || version === run.experimentVersion);
  if (isSame) return run;
  const message = 'This key has started another run: use a new key for each run.';
  throw new DomainError('request.invalid', undefined, [{ field: 'Idempotency-Key', message }]);
}

function newRun(prepared: PreparedRun, idempotencyKey: string | null, by: string): RunEntity {
  const { rigId, experiment, envelope, warnings } = prepared;
  return {
    id: newId(),
    rigId,
    experimentId: experiment.id,
    experimentVersion: experiment.version,
    experimentTitle: experiment.content.title,
    envelopeVersion: envelope.version,
    status: 'starting',
    verdict: null,
    reason: null,
    startedAt: new Date().toISOString(),
    endedAt: null,
    startedBy: by,
    scans: 0,
    results: {},
    warnings,
    fileSha256: null,
    idempotencyKey,
  };
}

function toOrder(run: RunEntity, { experiment, objective, warnings }: PreparedRun, file: string): RunOrder {
  const { title, graph } = experiment.content;
  return {
    runId: run.id,
    file,
    by: run.startedBy,
    experiment: { id: experiment.id, title, version: experiment.version, graph },
    objective,
    manifest: { warnings, objectiveId: experiment.content.objectiveId },
  };
}
