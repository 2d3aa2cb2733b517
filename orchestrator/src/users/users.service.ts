import { Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import type { EntityManager } from 'typeorm';
import { AuditService } from '../audit/audit.service.js';
import { hashPassword } from '../auth/password-hash.js';
import { insertRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { afterKey, toPage, type Page, type PageQuery } from '../paging/page.js';
import type { ChangeUser, CreateUser, User } from './dto/user.dto.js';
import { UserEntity } from './entities/user.entity.js';
import { checkNewPassword } from './password-rules.js';
import { UserStore } from './user-store.js';
import { toUser } from './user.mapper.js';

@Injectable()
export class UsersService {
  constructor(
    private readonly store: UserStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  async list(query: PageQuery): Promise<Page<User>> {
    const rows = await this.store.list(afterKey(query) ?? '', query.limit + 1);
    return toPage(rows, query.limit, (row) => row.account, toUser);
  }

  /**
   * @throws user.weak-password
   * @throws user.exists
   */
  async create({ account, title, roles, password }: CreateUser, by: string): Promise<User> {
    checkNewPassword(password, account);
    const passwordHash = await hashPassword(password);
    return this.queue.transaction(async (manager) => {
      if (await manager.existsBy(UserEntity, { account })) {
        throw new DomainError('user.exists', undefined, [
          { field: 'account', message: 'This name is taken.' },
        ]);
      }
      const user: UserEntity = {
        account,
        title,
        roles,
        passwordHash,
        isEnabled: true,
        sessionGeneration: 1,
        createdAt: new Date().toISOString(),
      };
      await insertRow(manager, UserEntity, user);
      await this.audit.record({ account: by, action: 'user.created', subject: account });
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
    const { password } = change;
    if (password !== undefined) checkNewPassword(password, account);
    const passwordHash = password === undefined ? undefined : await hashPassword(password);
    return this.queue.transaction(async (manager) => {
      const user = await manager.findOneBy(UserEntity, { account });
      if (user === null) throw new DomainError('user.not-found');
      user.title = change.title ?? user.title;
      user.roles = change.roles ?? user.roles;
      user.isEnabled = change.isEnabled ?? user.isEnabled;
      if (passwordHash !== undefined) user.passwordHash = passwordHash;
      if (passwordHash !== undefined || !user.isEnabled) user.sessionGeneration += 1;
      await manager.save(UserEntity, user);
      await refuseWithoutAdministrator(manager);
      await this.audit.record({
        account: by,
        action: 'user.changed',
        subject: account,
        reason: summary(change),
      });
      return toUser(user);
    });
  }
}

/** Somebody must remain who can give roles; thrown inside the transaction, it undoes the change. */
async function refuseWithoutAdministrator(manager: EntityManager): Promise<void> {
  const enabled = await manager.find(UserEntity, { where: { isEnabled: true } });
  if (!enabled.some((user) => user.roles.includes('administrator'))) {
    throw new DomainError('user.last-administrator');
  }
}

function summary({ title, roles, password, isEnabled }: ChangeUser): string {
  const parts = [
    title === undefined ? '' : `title "${title}"`,
    roles === undefined ? '' : `roles ${roles.join(', ')}`,
    password === undefined ? '' : 'new password',
    isEnabled === undefined ? '' : isEnabled ? 'enabled' : 'disabled',
  ];
  return parts.filter((part) => part !== '').join('; ');
}
