import { Injectable } from '@nestjs/common';
import { DomainError, type Interlock, type RigStatus } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { EnvelopeStore } from '../envelopes/envelope-store.js';
import { newId } from '../ids/new-id.js';
import { afterKey, toPage, type Page, type PageQuery } from '../paging/page.js';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';
import { RigStore } from '../rigs/rig-store.js';
import type { ProofTest, ProofTestSignature, ProofTestStart } from './dto/proof-test.dto.js';
import { ProofTestEntity } from './entities/proof-test.entity.js';
import { ProofTestStore } from './proof-test-store.js';
import { toProofTest } from './proof-test.mapper.js';
import { requireSignable } from './signature-faults.js';

/** A condition is taken as true for its delay, two scans and this much longer, s. */
const forcedBeyondS = 1;
const forcedAtMostS = 600;

/** The life of a proof test: begun on an armed rig, measured by its host, signed by a person. */
@Injectable()
export class ProofTestsService {
  constructor(
    private readonly store: ProofTestStore,
    private readonly envelopes: EnvelopeStore,
    private readonly rigs: RigStore,
    private readonly hosts: RigHostsService,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  async list(rigId: string, query: PageQuery): Promise<Page<ProofTest>> {
    const rows = await this.store.list(rigId, afterKey(query), query.limit + 1);
    return toPage(rows, query.limit, ({ id }) => id, toProofTest);
  }

  async get(rigId: string, id: string): Promise<ProofTest> {
    return toProofTest(await this.store.get(rigId, id));
  }

  /** Arms a rig whose proof tests are overdue, so that they can be done; no run starts until they are. */
  async arm(rigId: string, by: string): Promise<RigStatus> {
    const status = await this.hosts.commandForStatus(rigId, { type: 'arm', by });
    await this.audit.record({ account: by, action: 'rig.armed-for-proof-test', rigId });
    return status;
  }

  /**
   * Begins a proof test; one that is open on the rig is abandoned. It arms nothing. A forced one takes the condition
   * as true at once, and what follows is what would follow on the rig.
   *
   * @throws envelope.none-in-force, interlock.not-found, rig.not-armed, rig.busy
   */
  async start(rigId: string, order: ProofTestStart, by: string): Promise<ProofTest> {
    const { content: rig } = await this.rigs.get(rigId);
    const envelope = await this.envelopes.inForce(rigId);
    if (envelope === null) throw new DomainError('envelope.none-in-force');
    const definition = envelope.content.interlocks.find(({ id }) => id === order.interlock);
    if (!definition) throw new DomainError('interlock.not-found');
    requireArmed(await this.hosts.currentStatus(rigId));
    const row = newTest(rigId, envelope, definition, order.method, by);
    row.limitMs = 1000 * definition.delayS + 2 * rig.periodMs;
    await this.queue.transaction(async (manager) => {
      await updateRow(manager, ProofTestEntity, { rigId, status: 'open' }, { status: 'abandoned' });
      await insertRow(manager, ProofTestEntity, row);
      const act = { account: by, action: 'proof-test.started', rigId, subject: row.id };
      await this.audit.record({ ...act, after: order });
    });
    if (order.method === 'forced') await this.force(row, by);
    return toProofTest(row);
  }

  /**
   * @throws proof-test.not-open, proof-test.no-response where it did not act and is said to have passed
   * @throws request.invalid where a note is needed
   */
  sign(rigId: string, id: string, signature: ProofTestSignature, by: string): Promise<ProofTest> {
    return this.queue.transaction(async (manager) => {
      const row = await this.store.get(rigId, id);
      requireSignable(row, signature);
      const signed = {
        ...signature,
        status: 'signed' as const,
        signedBy: by,
        signedAt: new Date().toISOString(),
      };
      await updateRow(manager, ProofTestEntity, { id }, signed);
      const after = toProofTest({ ...row, ...signed });
      await this.audit.record({ account: by, action: 'proof-test.signed', rigId, subject: id, after });
      return after;
    });
  }

  private async force({ id, rigId, definition, limitMs }: ProofTestEntity, by: string): Promise<void> {
    const forS = Math.min(limitMs / 1000 + forcedBeyondS, forcedAtMostS);
    try {
      await this.hosts.command(rigId, { type: 'force-interlock', interlock: definition.id, forS, by });
    } catch (error) {
      await this.queue.transaction((manager) =>
        updateRow(manager, ProofTestEntity, { id }, { status: 'abandoned' }),
      );
      throw error;
    }
  }
}

function requireArmed({ phase, runId }: RigStatus): void {
  if (runId !== null) throw new DomainError('rig.busy');
  if (phase === 'tripped') throw new DomainError('rig.tripped');
  if (phase !== 'armed') throw new DomainError('rig.not-armed');
}

function newTest(
  rigId: string,
  envelope: { id: string; version: number },
  definition: Interlock,
  method: ProofTestEntity['method'],
  by: string,
): ProofTestEntity {
  return {
    id: newId(),
    rigId,
    envelopeId: envelope.id,
    envelopeVersion: envelope.version,
    interlock: definition.id,
    definition,
    method,
    status: 'open',
    startedBy: by,
    startedAt: new Date().toISOString(),
    limitMs: 0,
    conditionAt: null,
    responseMs: null,
    writes: null,
    outcome: null,
    note: null,
    signedBy: null,
    signedAt: null,
  };
}
