import { Injectable, type OnModuleInit } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { UserStore } from '../users/user-store.js';
import type { Session, SignIn } from './dto/session.dto.js';
import { decoyHash, isPasswordOf } from './password-hash.js';
import { SessionsService } from './sessions.service.js';
import { SignInThrottle } from './sign-in-throttle.js';

@Injectable()
export class AuthService implements OnModuleInit {
  constructor(
    private readonly users: UserStore,
    private readonly sessions: SessionsService,
    private readonly throttle: SignInThrottle,
    private readonly audit: AuditService,
  ) {}

  /** Made ahead, so that the first unknown account takes no longer than the next. */
  async onModuleInit(): Promise<void> {
    await decoyHash();
  }

  /**
   * Checks a password and issues a session. Unknown account, disabled account and wrong password are told
   * apart neither by the answer nor by the time it takes.
   *
   * @throws auth.failed
   * @throws request.too-many
   */
  async signIn({ account, password }: SignIn, address: string): Promise<{ session: Session; token: string }> {
    this.throttle.begin(account, address);
    const user = await this.users.find(account);
    const isRight = await isPasswordOf(password, user?.passwordHash ?? (await decoyHash()));
    if (user === null || !isRight || !user.isEnabled) throw new DomainError('auth.failed');
    this.throttle.succeed(account, address);
    await this.audit.record({ account, action: 'account.signed-in' });
    const token = await this.sessions.issue(account, user.sessionGeneration);
    return { session: { account, title: user.title, roles: user.roles }, token };
  }
}
