import { Inject, Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { Credentials } from './credentials.service.js';
import type { Enrolment, SecondFactor } from './dto/second-factor.dto.js';
import type { Reauthentication } from './dto/session.dto.js';
import { SecondFactors } from './second-factors.service.js';
import { SignInThrottle } from './sign-in-throttle.js';

/** What people do with their own authenticator. */
@Injectable()
export class SecondFactorService {
  constructor(
    private readonly credentials: Credentials,
    private readonly factors: SecondFactors,
    private readonly throttle: SignInThrottle,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  async state(account: string): Promise<SecondFactor> {
    const factor = await this.factors.find(account);
    return {
      isSetUp: factor !== null,
      isNeededToApprove: this.config.isSecondFactorNeeded,
      recoveryCodesLeft: factor?.recoveryHashes.length ?? 0,
    };
  }

  /**
   * @throws as `Credentials.check`
   * @throws auth.second-factor-exists
   */
  async begin(account: string, { password, code }: Reauthentication, address: string): Promise<Enrolment> {
    await this.credentials.check({ account, password, code }, address);
    return this.factors.enrol(account);
  }

  /** @throws as `SecondFactors.confirm`, and request.too-many */
  async confirm(account: string, code: string, address: string): Promise<string[]> {
    this.throttle.begin(account, address);
    const codes = await this.queue.transaction(async () => {
      const made = await this.factors.confirm(account, code);
      await this.audit.record({ account, action: 'account.second-factor-set-up', subject: account });
      return made;
    });
    this.throttle.succeed(account, address);
    return codes;
  }

  /**
   * @throws as `Credentials.check`
   * @throws auth.second-factor-missing
   * @throws user.weak-password where the password is too short to be the only factor
   */
  async remove(account: string, { password, code }: Reauthentication, address: string): Promise<void> {
    const { isPasswordShort } = await this.credentials.check({ account, password, code }, address);
    if (isPasswordShort) {
      throw new DomainError('user.weak-password', undefined, [
        {
          field: 'password',
          message: 'It is too short to be the only factor: change it to a longer one first.',
        },
      ]);
    }
    await this.queue.transaction(async () => {
      await this.factors.remove(account);
      await this.audit.record({ account, action: 'account.second-factor-removed', subject: account });
    });
  }
}
