import { Inject, Injectable } from '@nestjs/common';
import { DomainError, type Role } from '@cresthold/shared';
import type { EntityManager } from 'typeorm';
import { AuditService } from '../audit/audit.service.js';
import { hashPassword } from '../auth/password-hash.js';
import { SecondFactors } from '../auth/second-factors.service.js';
import { SessionsService } from '../auth/sessions.service.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { insertRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { afterKey, toPage, type Page, type PageQuery } from '../paging/page.js';
import type { ChangeUser, CreateUser, RigLimit, User } from './dto/user.dto.js';
import { UserEntity } from './entities/user.entity.js';
import { checkNewPassword, lengthOf, minLengthAlone } from './password-rules.js';
import { UserStore } from './user-store.js';
import { toUser } from './user.mapper.js';

@Injectable()
export class UsersService {
  constructor(
    private readonly store: UserStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
    private readonly sessions: SessionsService,
    private readonly factors: SecondFactors,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  async list(query: PageQuery): Promise<Page<User>> {
    const rows = await this.store.list(afterKey(query) ?? '', query.limit + 1);
    return toPage(rows, query.limit, (row) => row.account, toUser);
  }

  /**
   * @throws user.weak-password
   * @throws user.exists
   */
  async create({ account, title, roles, rigLimits, password }: CreateUser, by: string): Promise<User> {
    const context = { account, words: [title, this.config.station], hasSecondFactor: false };
    checkNewPassword(password, context);
    const user: UserEntity = {
      account,
      title,
      roles,
      rigLimits: limitsOf(rigLimits ?? [], roles),
      passwordHash: await hashPassword(password),
      isPasswordShort: false,
      isEnabled: true,
      sessionGeneration: 1,
      createdAt: new Date().toISOString(),
    };
    return this.queue.transaction(async (manager) => {
      if (await manager.existsBy(UserEntity, { account })) {
        throw new DomainError('user.exists', undefined, [
          { field: 'account', message: 'This name is taken.' },
        ]);
      }
      await insertRow(manager, UserEntity, user);
      await this.audit.record({
        account: by,
        action: 'user.created',
        subject: account,
        after: rightsOf(user),
      });
      return toUser(user);
    });
  }

  /**
   * Changes what is given. A new password or disabling ends the account's sessions.
   *
   * @throws user.not-found
   * @throws user.weak-password
   * @throws user.last-administrator
   */
  async change(account: string, change: ChangeUser, by: string): Promise<User> {
    const hasSecondFactor = (await this.factors.find(account)) !== null;
    const { password } = change;
    if (password !== undefined) {
      const title = change.title ?? (await this.store.find(account))?.title ?? '';
      checkNewPassword(password, { account, words: [title, this.config.station], hasSecondFactor });
    }
    const passwordHash = password === undefined ? undefined : await hashPassword(password);
    return this.queue.transaction(async (manager) => {
      const user = await find(manager, account);
      const before = rightsOf(user);
      apply(user, change, passwordHash);
      await manager.save(UserEntity, user);
      await refuseWithoutAdministrator(manager);
      if (passwordHash !== undefined || !user.isEnabled) await this.sessions.endAll(account);
      await this.audit.record({
        account: by,
        action: 'user.changed',
        subject: account,
        reason: summary(change),
        before,
        after: rightsOf(user),
      });
      return toUser(user);
    });
  }
}

/** @throws user.not-found */
async function find(manager: EntityManager, account: string): Promise<UserEntity> {
  const user = await manager.findOneBy(UserEntity, { account });
  if (user === null) throw new DomainError('user.not-found');
  return user;
}

function apply(user: UserEntity, change: ChangeUser, passwordHash: string | undefined): void {
  user.title = change.title ?? user.title;
  user.roles = change.roles ?? user.roles;
  user.rigLimits = limitsOf(change.rigLimits ?? user.rigLimits, user.roles);
  user.isEnabled = change.isEnabled ?? user.isEnabled;
  if (passwordHash === undefined || change.password === undefined) return;
  user.passwordHash = passwordHash;
  user.isPasswordShort = lengthOf(change.password) < minLengthAlone;
}

function limitsOf(limits: readonly RigLimit[], roles: readonly Role[]): RigLimit[] {
  return limits.filter(({ role }) => roles.includes(role));
}

/** What the audit log keeps of an account. */
function rightsOf({ title, roles, rigLimits, isEnabled }: UserEntity) {
  return { title, roles, rigLimits, isEnabled };
}

/** Somebody must remain who can give roles; thrown inside the transaction, it undoes the change. */
async function refuseWithoutAdministrator(manager: EntityManager): Promise<void> {
  const enabled = await manager.find(UserEntity, { where: { isEnabled: true } });
  if (!enabled.some((user) => user.roles.includes('administrator'))) {
    throw new DomainError('user.last-administrator');
  }
}

function summary({ title, roles, rigLimits, password, isEnabled }: ChangeUser): string {
  const parts = [
    title === undefined ? '' : `title "${title}"`,
    roles === undefined ? '' : `roles ${roles.join(', ')}`,
    rigLimits === undefined ? '' : 'rigs of roles',
    password === undefined ? '' : 'new password',
    isEnabled === undefined ? '' : isEnabled ? 'enabled' : 'disabled',
  ];
  return parts.filter((part) => part !== '').join('; ');
}
