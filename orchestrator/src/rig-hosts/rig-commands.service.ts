import { Injectable } from '@nestjs/common';
import { DomainError, moveAnswerSchema, type RigStatus } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { ProofTestDues } from '../proof-tests/proof-test-dues.service.js';
import { RigStore } from '../rigs/rig-store.js';
import type { FaultChange, Move, MoveRelease } from './dto/rig-commands.dto.js';
import { RigHostsService } from './rig-hosts.service.js';

/** What people do to a rig by hand; each act is kept with who did it. */
@Injectable()
export class RigCommandsService {
  constructor(
    private readonly hosts: RigHostsService,
    private readonly rigs: RigStore,
    private readonly audit: AuditService,
    private readonly proofTests: ProofTestDues,
  ) {}

  status(rigId: string): Promise<RigStatus> {
    return this.hosts.currentStatus(rigId);
  }

  /** @throws proof-test.overdue, and what the rig's host answers */
  async arm(rigId: string, by: string): Promise<RigStatus> {
    await this.proofTests.requireInDate(rigId);
    const status = await this.hosts.commandForStatus(rigId, { type: 'arm', by });
    await this.audit.record({ account: by, action: 'rig.armed', rigId });
    return status;
  }

  async disarm(rigId: string, by: string): Promise<RigStatus> {
    const status = await this.hosts.commandForStatus(rigId, { type: 'disarm', by });
    await this.audit.record({ account: by, action: 'rig.disarmed', rigId });
    return status;
  }

  /** A press of hold-to-move is kept once; its renewals, several a second, are not. */
  async move(rigId: string, { channel, value, hold }: Move, by: string): Promise<RigStatus> {
    const command = { type: 'move', channel, value, by, hold } as const;
    const { data, status } = await this.hosts.commandForAnswer(rigId, command);
    const answer = moveAnswerSchema.safeParse(data);
    if (answer.data?.isRenewal === true) return status;
    const subject = `${channel} to ${value}${hold === null ? '' : ', while held'}`;
    await this.audit.record({ account: by, action: 'rig.moved-by-hand', rigId, subject });
    return status;
  }

  /** The end of a press; also of one that is over already. */
  async releaseMove(rigId: string, { channel, holdId }: MoveRelease): Promise<RigStatus> {
    return this.hosts.commandForStatus(rigId, { type: 'release-move', channel, holdId });
  }

  /** The stop comes first, its entry in the audit log after it. */
  async emergencyStop(rigId: string, reason: string, by: string): Promise<RigStatus> {
    const status = await this.hosts.emergencyStop(rigId, by, reason);
    await this.audit.record({ account: by, action: 'rig.emergency-stopped', rigId, reason });
    return status;
  }

  async emergencyStopAll(reason: string, by: string): Promise<RigStatus[]> {
    const statuses = await this.hosts.emergencyStopAll(by, reason);
    await this.audit.record({ account: by, action: 'rig.all-emergency-stopped', reason });
    return statuses;
  }

  async reset(rigId: string, reason: string, by: string): Promise<RigStatus> {
    const status = await this.hosts.reset(rigId, by, reason);
    await this.audit.record({ account: by, action: 'rig.trip-reset', rigId, reason });
    return status;
  }

  /**
   * Puts a fault on a connection of a bench, or takes it off. It lasts no longer than the rig's host.
   *
   * @throws rig.not-a-bench for every other rig, whether its host is up or not
   */
  async setFault(rigId: string, connection: string, { fault }: FaultChange, by: string): Promise<RigStatus> {
    const { content: rig } = await this.rigs.get(rigId);
    if (!rig.isBench) throw new DomainError('rig.not-a-bench');
    const status = await this.hosts.commandForStatus(rigId, { type: 'set-fault', connection, fault, by });
    const action = fault ? 'rig.fault-injected' : 'rig.fault-cleared';
    const reason = fault ? JSON.stringify(fault) : undefined;
    await this.audit.record({ account: by, action, rigId, subject: connection, reason });
    return status;
  }
}
