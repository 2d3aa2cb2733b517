import { Injectable, Logger } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError, type FieldFault, type Role } from '@cresthold/shared';
import type { Repository } from 'typeorm';
import { AuditService } from '../audit/audit.service.js';
import type { SignedInUser } from '../auth/signed-in-user.js';
import { insertRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { newId } from '../ids/new-id.js';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';
import { RigLockoutEntity } from '../rigs/entities/rig-lockout.entity.js';
import { RigStore } from '../rigs/rig-store.js';
import { UserStore } from '../users/user-store.js';
import type { Lockout, NewLockout } from './dto/lockout.dto.js';

/** Roles that can be named on a lockout. */
const liftingRoles: readonly Role[] = ['safety-officer', 'administrator'];

/** Every person's own hold on a rig; the rig is free when all are lifted. */
@Injectable()
export class LockoutsService {
  private readonly logger = new Logger(LockoutsService.name);
  /** What a host is told comes in the order in which it became true. */
  private readonly telling = new Map<string, Promise<void>>();

  constructor(
    @InjectRepository(RigLockoutEntity) private readonly lockouts: Repository<RigLockoutEntity>,
    private readonly rigs: RigStore,
    private readonly users: UserStore,
    private readonly hosts: RigHostsService,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** @throws rig.not-found */
  async list(rigId: string): Promise<Lockout[]> {
    await this.rigs.get(rigId);
    return this.read(rigId);
  }

  /**
   * Kept on disk first: a lockout holds even where no host is there to hear of it.
   *
   * @throws rig.not-found, lockout.exists
   * @throws request.invalid where somebody is named who is no safety officer and no administrator
   */
  async set(rigId: string, { reason, mayLift }: NewLockout, by: string): Promise<Lockout> {
    await this.rigs.get(rigId);
    await this.refuseUnfitLifters(mayLift);
    const row = { id: newId(), rigId, by, reason, at: new Date().toISOString(), mayLift };
    await this.queue.transaction(async (manager) => {
      if (await manager.existsBy(RigLockoutEntity, { rigId, by })) throw new DomainError('lockout.exists');
      await insertRow(manager, RigLockoutEntity, row);
      const after = { mayLift };
      await this.audit.record({ account: by, action: 'rig.locked-out', rigId, subject: by, reason, after });
    });
    await this.tellHost(rigId);
    return row;
  }

  /**
   * @returns the lockouts that remain
   * @throws lockout.not-found
   * @throws lockout.not-yours, whoever asks, where it is another person's and does not name the asker
   */
  async lift(rigId: string, id: string, reason: string, user: SignedInUser): Promise<Lockout[]> {
    await this.queue.transaction(async (manager) => {
      const row = await manager.findOneBy(RigLockoutEntity, { rigId, id });
      if (row === null) throw new DomainError('lockout.not-found');
      if (!mayLift(row, user)) throw new DomainError('lockout.not-yours', refusal(row));
      await manager.delete(RigLockoutEntity, { id });
      const act = { account: user.account, action: 'rig.lockout-lifted', rigId, subject: row.by, reason };
      await this.audit.record({ ...act, before: toLockout(row) });
    });
    await this.tellHost(rigId);
    return this.read(rigId);
  }

  private async read(rigId: string): Promise<Lockout[]> {
    return (await this.lockouts.find({ where: { rigId }, order: { id: 'ASC' } })).map(toLockout);
  }

  private async refuseUnfitLifters(accounts: readonly string[]): Promise<void> {
    const faults: FieldFault[] = [];
    for (const [index, account] of accounts.entries()) {
      const user = await this.users.find(account);
      const isFit = user?.isEnabled === true && user.roles.some((role) => liftingRoles.includes(role));
      const message = `"${account}" is no safety officer and no administrator: name one who is.`;
      if (!isFit) faults.push({ field: `mayLift[${index}]`, message });
    }
    refuseFaults(faults);
  }

  private tellHost(rigId: string): Promise<void> {
    const before = this.telling.get(rigId) ?? Promise.resolve();
    const told = before.then(async () => {
      const { isLockedOut } = await this.rigs.state(rigId);
      await this.hosts.setLockout(rigId, isLockedOut);
    });
    const settled = told.catch((error: unknown) => {
      this.logger.warn(`Rig "${rigId}": its host did not take the lockout. ${String(error)}`);
    });
    this.telling.set(rigId, settled);
    return told;
  }
}

function mayLift({ by, mayLift: named }: RigLockoutEntity, { account, roles }: SignedInUser): boolean {
  if (account === by) return true;
  if (!roles.some((role) => liftingRoles.includes(role))) return false;
  return named.length === 0 || named.includes(account);
}

function refusal({ by, mayLift: named }: RigLockoutEntity): string {
  const others = named.length === 0 ? 'a safety officer or an administrator' : named.join(', ');
  return `${by} holds the rig. It is lifted by ${by}, or by ${others}.`;
}

function toLockout({ id, rigId, by, reason, at, mayLift: named }: RigLockoutEntity): Lockout {
  return { id, rigId, by, reason, at, mayLift: named };
}
