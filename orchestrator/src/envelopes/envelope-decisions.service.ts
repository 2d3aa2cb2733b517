import { Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { requireRevision } from '../documents/etag.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { RigHostsPort } from '../rigs/rig-hosts.port.js';
import { requireResting } from '../rigs/rig-phase.js';
import { RigStore } from '../rigs/rig-store.js';
import type { Envelope } from './dto/envelope.dto.js';
import { EnvelopeEntity } from './entities/envelope.entity.js';
import { envelopeFaults } from './envelope-faults.js';
import { EnvelopeStore } from './envelope-store.js';
import { toEnvelope } from './envelope.mapper.js';

/** Who decides about a submitted envelope, why, and on which revision. */
export interface DecisionOf {
  id: string;
  /** Null where the decider did not say. */
  revision: number | null;
  reason: string;
  by: string;
}

/** The second person's decision. */
@Injectable()
export class EnvelopeDecisionsService {
  constructor(
    private readonly store: EnvelopeStore,
    private readonly rigs: RigStore,
    private readonly hosts: RigHostsPort,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /**
   * Puts a submitted envelope in force and supersedes the one before. Where the rig's host then refuses it,
   * both are as they were.
   *
   * @throws envelope.own-draft where `by` is its author
   * @throws envelope.wrong-status
   * @throws request.precondition
   * @throws rig.busy unless idle, offline or tripped
   * @throws request.invalid where it does not fit the rig any more
   */
  async approve(decision: DecisionOf): Promise<Envelope> {
    const { approved, replacedId } = await this.putInForce(decision);
    try {
      await this.tellHost(approved);
    } catch (error) {
      await this.undo(approved, replacedId, decision.by);
      throw error;
    }
    return toEnvelope(approved);
  }

  /**
   * Gives a submitted envelope back to its author.
   *
   * @throws envelope.own-draft where `by` is its author
   * @throws envelope.wrong-status
   * @throws request.precondition
   */
  giveBack(decision: DecisionOf): Promise<Envelope> {
    return this.queue.transaction(async (manager) => {
      const row = await this.decidable(decision);
      const changed = decided(decision, 'returned');
      await updateRow(manager, EnvelopeEntity, { id: row.id }, changed);
      await this.record('envelope.returned', row, decision);
      return toEnvelope({ ...row, ...changed });
    });
  }

  private putInForce(decision: DecisionOf) {
    return this.queue.transaction(async (manager) => {
      const row = await this.decidable(decision);
      requireResting(this.hosts, row.rigId, 'approve the envelope');
      refuseFaults(envelopeFaults(row.content, (await this.rigs.get(row.rigId)).content));
      const replaced = await this.store.inForce(row.rigId);
      if (replaced !== null) {
        await updateRow(manager, EnvelopeEntity, { id: replaced.id }, { status: 'superseded' });
      }
      const changed = decided(decision, 'in-force');
      await updateRow(manager, EnvelopeEntity, { id: row.id }, changed);
      await this.record('envelope.approved', row, decision);
      return { approved: { ...row, ...changed }, replacedId: replaced?.id ?? null };
    });
  }

  private async tellHost({ id, rigId, version, content }: EnvelopeEntity): Promise<void> {
    // A host that is not there yet reads the envelope from the database when it starts.
    if (this.hosts.status(rigId) === null) return this.hosts.reconfigure(rigId);
    await this.hosts.command(rigId, { type: 'set-envelope', envelope: { id, version, content } });
  }

  private async undo(approved: EnvelopeEntity, replacedId: string | null, by: string): Promise<void> {
    const { id, rigId } = approved;
    await this.queue.transaction(async (manager) => {
      // Somebody may have approved another one meanwhile, and that one stays.
      if (!(await manager.existsBy(EnvelopeEntity, { id, status: 'in-force' }))) return;
      const undecided = { status: 'submitted' as const, decidedBy: null, reason: null, decidedAt: null };
      await updateRow(manager, EnvelopeEntity, { id }, undecided);
      if (replacedId !== null) {
        await updateRow(manager, EnvelopeEntity, { id: replacedId }, { status: 'in-force' });
      }
      const reason = 'The rig host refused it.';
      await this.audit.record({
        account: by,
        action: 'envelope.approval-undone',
        rigId,
        subject: id,
        reason,
      });
    });
  }

  private async decidable({ id, by, revision }: DecisionOf): Promise<EnvelopeEntity> {
    const row = await this.store.get(id);
    if (row.author === by || row.submittedBy === by) throw new DomainError('envelope.own-draft');
    if (row.status !== 'submitted') {
      throw new DomainError('envelope.wrong-status', `It is ${row.status}: only a submitted one is decided.`);
    }
    requireRevision(row.revision, revision);
    return row;
  }

  private record(action: string, { id: subject, rigId }: EnvelopeEntity, { by, reason }: DecisionOf) {
    return this.audit.record({ account: by, action, rigId, subject, reason });
  }
}

function decided<S extends 'in-force' | 'returned'>({ by, reason }: DecisionOf, status: S) {
  return { status, decidedBy: by, reason, decidedAt: new Date().toISOString() };
}
