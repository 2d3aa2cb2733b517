import { Inject, Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import type { SignedInPlaces } from '../auth/dto/session.dto.js';
import { hashPassword } from '../auth/password-hash.js';
import { SecondFactors } from '../auth/second-factors.service.js';
import { toPlaces } from '../auth/session.mapper.js';
import { SessionsService } from '../auth/sessions.service.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import type { ResetSecondFactor } from './dto/user.dto.js';
import { UserEntity } from './entities/user.entity.js';
import { checkNewPassword } from './password-rules.js';
import { UserStore } from './user-store.js';

/** What an administrator does about how other people get in. */
@Injectable()
export class UserAccessService {
  constructor(
    private readonly store: UserStore,
    private readonly sessions: SessionsService,
    private readonly factors: SecondFactors,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  /** @throws user.not-found */
  async listSessions(account: string, askingId: string): Promise<SignedInPlaces> {
    await this.get(account);
    return toPlaces(await this.sessions.list(account), askingId);
  }

  /**
   * Ends one session of an account, or all.
   *
   * @throws user.not-found
   * @throws auth.session-not-found
   */
  async endSessions(account: string, id: string | null, by: string): Promise<void> {
    await this.get(account);
    await this.queue.transaction(async () => {
      const ended = id === null ? await this.sessions.endAll(account) : await this.sessions.end(account, id);
      if (id !== null && ended === 0) throw new DomainError('auth.session-not-found');
      const action = id === null ? 'user.sessions-ended' : 'user.session-ended';
      await this.audit.record({ account: by, action, subject: account, after: { ended, id } });
    });
  }

  /**
   * Takes a lost authenticator away and ends all sessions of the account.
   *
   * @throws user.not-found
   * @throws auth.second-factor-missing
   * @throws user.weak-password where a longer password is needed and none, or a weak one, was given
   */
  async resetSecondFactor(account: string, order: ResetSecondFactor, by: string): Promise<void> {
    const { title, isPasswordShort } = await this.get(account);
    const { reason, password } = order;
    if (isPasswordShort || password !== undefined) {
      const context = { account, words: [title, this.config.station], hasSecondFactor: false };
      checkNewPassword(password ?? '', context);
    }
    const passwordHash = password === undefined ? undefined : await hashPassword(password);
    await this.queue.transaction(async (manager) => {
      await this.factors.remove(account);
      if (passwordHash !== undefined) {
        await updateRow(manager, UserEntity, { account }, { passwordHash, isPasswordShort: false });
      }
      await this.sessions.endAll(account);
      await this.audit.record({ account: by, action: 'user.second-factor-reset', subject: account, reason });
    });
  }

  private async get(account: string): Promise<UserEntity> {
    const user = await this.store.find(account);
    if (user === null) throw new DomainError('user.not-found');
    return user;
  }
}
