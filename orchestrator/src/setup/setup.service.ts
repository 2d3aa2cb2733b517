import { Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { isSameSecret, readableSecret } from '../auth/readable-secret.js';
import { SignInThrottle } from '../auth/sign-in-throttle.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { UserStore } from '../users/user-store.js';
import { UsersService } from '../users/users.service.js';
import type { User } from '../users/dto/user.dto.js';
import type { Setup } from './dto/setup.dto.js';

/** Makes the first administrator, for whoever can read what the server printed at its start. */
@Injectable()
export class SetupService {
  private readonly code = readableSecret(4);

  constructor(
    private readonly store: UserStore,
    private readonly users: UsersService,
    private readonly queue: TransactionQueue,
    private readonly throttle: SignInThrottle,
  ) {}

  async isNeeded(): Promise<boolean> {
    return !(await this.store.hasAny());
  }

  /** The code to print; null where nobody needs one. A new one is made at each start. */
  async currentCode(): Promise<string | null> {
    return (await this.isNeeded()) ? this.code : null;
  }

  /**
   * @throws auth.setup-done where an account exists already
   * @throws auth.setup-code
   * @throws user.weak-password
   * @throws request.too-many
   */
  async setUp({ code, account, title, password }: Setup, address: string): Promise<User> {
    if (!(await this.isNeeded())) throw new DomainError('auth.setup-done');
    this.throttle.begin('set-up code', address);
    if (!isSameSecret(code, this.code)) {
      throw new DomainError('auth.setup-code', undefined, [
        { field: 'code', message: 'This is not the code that the server printed at its last start.' },
      ]);
    }
    return this.queue.transaction(async () => {
      if (!(await this.isNeeded())) throw new DomainError('auth.setup-done');
      return this.users.create({ account, title, password, roles: ['administrator'] }, account);
    });
  }
}
