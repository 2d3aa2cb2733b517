import { Injectable } from '@nestjs/common';
import { DomainError, type HostCommand, type RunColumn, type RunEvent } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { rigCondition, type RigScope } from '../auth/rig-scope.js';
import { afterKey, toPage, type Page } from '../paging/page.js';
import type { RunEntity } from '../recordings/entities/run.entity.js';
import { RunReader } from '../recordings/run-reader.service.js';
import { RunRecords } from '../recordings/run-records.service.js';
import type { Samples } from '../recordings/run-file/index.js';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';
import type { Run, RunQuery, SamplesRequest } from './dto/run.dto.js';
import { toRun } from './run.mapper.js';

/** Runs as people and scripts see and steer them. */
@Injectable()
export class RunsService {
  constructor(
    private readonly records: RunRecords,
    private readonly reader: RunReader,
    private readonly hosts: RigHostsService,
    private readonly audit: AuditService,
  ) {}

  /**
   * Newest first.
   *
   * @param visible rigs whose runs may be shown
   */
  async list(query: RunQuery, visible: RigScope): Promise<Page<Run>> {
    const filter = { status: query.status, rigId: rigCondition(query.rigId, visible) };
    const rows = await this.records.list(filter, afterKey(query), query.limit + 1);
    return toPage(rows, query.limit, (run) => run.id, toRun);
  }

  /** @throws run.not-found */
  async get(runId: string): Promise<Run> {
    return toRun(await this.records.get(runId));
  }

  async pause(runId: string, reason: string, by: string): Promise<Run> {
    await this.steer(runId, { type: 'pause', by, reason });
    await this.audit.record({ account: by, action: 'run.paused', subject: runId, reason });
    return this.get(runId);
  }

  async resume(runId: string, by: string): Promise<Run> {
    await this.steer(runId, { type: 'resume', by });
    await this.audit.record({ account: by, action: 'run.resumed', subject: runId });
    return this.get(runId);
  }

  async stop(runId: string, reason: string, by: string): Promise<Run> {
    await this.steer(runId, { type: 'stop', by, reason });
    await this.audit.record({ account: by, action: 'run.stopped', subject: runId, reason });
    return this.get(runId);
  }

  async columns(runId: string): Promise<RunColumn[]> {
    await this.records.get(runId);
    return this.reader.columns(runId);
  }

  async samples(runId: string, request: SamplesRequest): Promise<Samples> {
    await this.records.get(runId);
    return this.reader.samples(runId, request);
  }

  async events(runId: string, afterSequence: number): Promise<RunEvent[]> {
    await this.records.get(runId);
    return this.reader.events(runId, afterSequence);
  }

  /** @throws run.ended where it has, and rig.illegal-move and the like from the host */
  private async steer(runId: string, command: HostCommand): Promise<void> {
    const run: RunEntity = await this.records.get(runId);
    if (run.endedAt !== null) throw new DomainError('run.ended');
    await this.hosts.command(run.rigId, command);
  }
}
