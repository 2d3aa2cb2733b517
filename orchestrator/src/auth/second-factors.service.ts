import { randomBytes } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError } from '@cresthold/shared';
import type { Repository } from 'typeorm';
import { TransactionQueue } from '../database/transaction-queue.js';
import type { Enrolment } from './dto/second-factor.dto.js';
import { SecondFactorEntity } from './entities/second-factor.entity.js';
import { readableSecret } from './readable-secret.js';
import { seal, unseal } from './sealed-secret.js';
import { hashOfToken } from './session-token.js';
import { otpauthUri, stepOfCode, toBase32 } from './totp.js';

export const SEALING_KEY = Symbol('sealing-key');

/** RFC 4226, section 4, R6 recommends 160 bits. */
const secretBytes = 20;
const recoveryCodeCount = 8;
/** 124 bits: enough to be kept as a plain hash (ASVS 5.0, 6.5.2 asks for 112). */
const recoveryGroups = 5;

/** Keeps authenticators and recovery codes, and judges codes; each code is good once. */
@Injectable()
export class SecondFactors {
  constructor(
    @InjectRepository(SecondFactorEntity) private readonly factors: Repository<SecondFactorEntity>,
    private readonly queue: TransactionQueue,
    @Inject(SEALING_KEY) private readonly key: Buffer,
  ) {}

  /** The account's authenticator; null where none was set up to the end. */
  async find(account: string): Promise<SecondFactorEntity | null> {
    const factor = await this.factors.findOneBy({ account });
    return factor === null || factor.confirmedAt === null ? null : factor;
  }

  /**
   * Makes a new secret, which counts once `confirm` has seen a code of it.
   *
   * @throws auth.second-factor-exists
   */
  async enrol(account: string): Promise<Enrolment> {
    const secret = randomBytes(secretBytes);
    await this.queue.transaction(async (manager) => {
      const before = await manager.findOneBy(SecondFactorEntity, { account });
      if (before !== null && before.confirmedAt !== null) throw new DomainError('auth.second-factor-exists');
      const sealedSecret = seal(secret, this.key, account);
      const row = { account, sealedSecret, confirmedAt: null, lastStep: 0, recoveryHashes: [] };
      await manager.save(SecondFactorEntity, row);
    });
    const text = toBase32(secret);
    return { secret: text.match(/.{1,4}/g)?.join(' ') ?? text, uri: otpauthUri(account, text) };
  }

  /**
   * @returns recovery codes, which are kept as hashes only
   * @throws auth.second-factor-missing where no enrolment was begun
   * @throws auth.second-factor-exists
   * @throws auth.code-wrong
   */
  confirm(account: string, code: string): Promise<string[]> {
    const codes = Array.from({ length: recoveryCodeCount }, () => readableSecret(recoveryGroups));
    return this.queue.transaction(async (manager) => {
      const factor = await manager.findOneBy(SecondFactorEntity, { account });
      if (factor === null) throw new DomainError('auth.second-factor-missing');
      if (factor.confirmedAt !== null) throw new DomainError('auth.second-factor-exists');
      const lastStep = this.stepOf(factor, code);
      if (lastStep === null) throw wrongCode();
      const change = {
        lastStep,
        confirmedAt: new Date().toISOString(),
        recoveryHashes: codes.map(hashOfCode),
      };
      await manager.save(SecondFactorEntity, { ...factor, ...change });
      return codes;
    });
  }

  /**
   * Judges a code of the authenticator or a recovery code and uses it up.
   *
   * @throws auth.code-needed where none was given
   * @throws auth.code-wrong
   */
  async use(account: string, code: string | undefined): Promise<void> {
    if (code === undefined) throw new DomainError('auth.code-needed');
    await this.queue.transaction(async (manager) => {
      const factor = await manager.findOneByOrFail(SecondFactorEntity, { account });
      const lastStep = this.stepOf(factor, code);
      const hash = hashOfCode(code);
      if (lastStep === null && !factor.recoveryHashes.includes(hash)) throw wrongCode();
      const recoveryHashes = factor.recoveryHashes.filter((one) => one !== hash);
      await manager.save(SecondFactorEntity, {
        ...factor,
        lastStep: lastStep ?? factor.lastStep,
        recoveryHashes,
      });
    });
  }

  /** @throws auth.second-factor-missing */
  async remove(account: string): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const { affected } = await manager.delete(SecondFactorEntity, { account });
      if (affected !== 1) throw new DomainError('auth.second-factor-missing');
    });
  }

  private stepOf({ account, sealedSecret, lastStep }: SecondFactorEntity, code: string): number | null {
    const digits = code.replace(/\s/g, '');
    return stepOfCode(unseal(sealedSecret, this.key, account), digits, Date.now(), lastStep);
  }
}

/** Case, spaces and hyphens do not matter. */
function hashOfCode(code: string): string {
  return hashOfToken(code.toUpperCase().replace(/[\s-]/g, ''));
}

function wrongCode(): DomainError {
  const message = 'This code is wrong, too old or was used already.';
  return new DomainError('auth.code-wrong', undefined, [{ field: 'code', message }]);
}
