import { Injectable, Logger, type OnModuleInit } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import type { UserEntity } from '../users/entities/user.entity.js';
import { UserStore } from '../users/user-store.js';
import { decoyHash, isPasswordOf } from './password-hash.js';
import { SecondFactors } from './second-factors.service.js';
import { SignInThrottle } from './sign-in-throttle.js';

/** What somebody shows to prove who he is. */
export interface Shown {
  account: string;
  password: string;
  code?: string | undefined;
}

/** Judges passwords and codes; the one place that does, so that all guesses are throttled together. */
@Injectable()
export class Credentials implements OnModuleInit {
  private readonly logger = new Logger(Credentials.name);

  constructor(
    private readonly users: UserStore,
    private readonly factors: SecondFactors,
    private readonly throttle: SignInThrottle,
  ) {}

  /** Made ahead, so that the first unknown account takes no longer than the next. */
  async onModuleInit(): Promise<void> {
    await decoyHash();
  }

  /**
   * Unknown account, disabled account and wrong password are told apart neither by the answer nor by the
   * time it takes. A code is asked for once the password was right.
   *
   * @throws auth.failed
   * @throws auth.code-needed
   * @throws auth.code-wrong
   * @throws request.too-many
   */
  async check({ account, password, code }: Shown, address: string): Promise<UserEntity> {
    this.throttle.begin(account, address);
    const user = await this.users.find(account);
    const isRight = await isPasswordOf(password, user?.passwordHash ?? (await decoyHash()));
    if (user === null || !isRight || !user.isEnabled) {
      this.logger.warn(`Refused a password for ${JSON.stringify(account)} from ${address}.`);
      throw new DomainError('auth.failed');
    }
    if ((await this.factors.find(account)) !== null) await this.useCode(account, code, address);
    this.throttle.succeed(account, address);
    return user;
  }

  private async useCode(account: string, code: string | undefined, address: string): Promise<void> {
    try {
      await this.factors.use(account, code);
    } catch (error) {
      if (code !== undefined)
        this.logger.warn(`Refused a code for ${JSON.stringify(account)} from ${address}.`);
      throw error;
    }
  }
}
