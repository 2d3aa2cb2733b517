import { Inject, Injectable } from '@nestjs/common';
import { DomainError, type Role } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { updateRow } from '../database/rows.js';
import { UserEntity } from '../users/entities/user.entity.js';
import { checkNewPassword, lengthOf, minLengthAlone } from '../users/password-rules.js';
import { Credentials } from './credentials.service.js';
import type { PasswordChange, Reauthentication, Session, SignIn } from './dto/session.dto.js';
import { hashPassword } from './password-hash.js';
import { SecondFactors } from './second-factors.service.js';
import { SessionsService, type SignInPlace } from './sessions.service.js';
import type { SignedInUser } from './signed-in-user.js';

/** Roles that approve envelopes and reset trips. */
const approvers: readonly Role[] = ['safety-officer'];

@Injectable()
export class AuthService {
  constructor(
    private readonly credentials: Credentials,
    private readonly factors: SecondFactors,
    private readonly sessions: SessionsService,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  /**
   * Checks password and code and begins a session; the one that the browser had ends.
   *
   * @throws as `Credentials.check`
   */
  async signIn(
    shown: SignIn,
    place: SignInPlace,
    cookieHeader: string | undefined,
  ): Promise<{ session: Session; token: string }> {
    const { account, title, roles, rigLimits } = await this.credentials.check(shown, place.address);
    const before = await this.sessions.ofCookieHeader(cookieHeader);
    if (before !== null) await this.sessions.end(before.user.account, before.user.sessionId);
    const { id, token } = await this.sessions.begin(account, place);
    await this.audit.record({ account, action: 'account.signed-in', subject: id });
    return { session: { account, title, roles, rigLimits }, token };
  }

  async signOut({ account, sessionId }: SignedInUser): Promise<void> {
    await this.queue.transaction(async () => {
      await this.sessions.end(account, sessionId);
      await this.audit.record({ account, action: 'account.signed-out', subject: sessionId });
    });
  }

  /**
   * Takes the password again, so that acts which need it are allowed for a while.
   *
   * @throws as `Credentials.check`
   * @throws auth.second-factor-needed where the station's setting asks for one and there is none
   */
  async reauthenticate(
    { password, code }: Reauthentication,
    { account, roles, sessionId }: SignedInUser,
    address: string,
  ): Promise<{ token: string; until: string }> {
    await this.credentials.check({ account, password, code }, address);
    const isApprover = roles.some((role) => approvers.includes(role));
    if (this.config.isSecondFactorNeeded && isApprover && (await this.factors.find(account)) === null) {
      throw new DomainError('auth.second-factor-needed');
    }
    const elevation = await this.sessions.elevate(sessionId);
    await this.audit.record({ account, action: 'account.reauthenticated', subject: sessionId });
    return elevation;
  }

  /**
   * Changes one's own password and ends all other sessions.
   *
   * @returns the new token of this session
   * @throws as `Credentials.check`
   * @throws user.weak-password
   */
  async changePassword(
    { password, code, newPassword }: PasswordChange,
    { account, title, sessionId }: SignedInUser,
    address: string,
  ): Promise<string> {
    await this.credentials.check({ account, password, code }, address);
    const hasSecondFactor = (await this.factors.find(account)) !== null;
    const context = { account, words: [title, this.config.station], hasSecondFactor };
    checkNewPassword(newPassword, context, 'newPassword');
    const passwordHash = await hashPassword(newPassword);
    const isPasswordShort = lengthOf(newPassword) < minLengthAlone;
    return this.queue.transaction(async (manager) => {
      await updateRow(manager, UserEntity, { account }, { passwordHash, isPasswordShort });
      await this.sessions.endAll(account, sessionId);
      await this.audit.record({ account, action: 'account.password-changed', subject: account });
      return this.sessions.renew(sessionId);
    });
  }

  /**
   * Ends one of one's own sessions, or all but this one.
   *
   * @throws auth.session-not-found
   */
  async endSessions({ account, sessionId }: SignedInUser, id: string | null): Promise<void> {
    await this.queue.transaction(async () => {
      const count =
        id === null ? await this.sessions.endAll(account, sessionId) : await this.sessions.end(account, id);
      if (id !== null && count === 0) throw new DomainError('auth.session-not-found');
      await this.audit.record({
        account,
        action: 'account.session-ended',
        subject: id ?? account,
        after: { ended: count },
      });
    });
  }
}
