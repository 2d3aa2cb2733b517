import { Injectable } from '@nestjs/common';
import { RetryLaterError } from '../problem-details/retry-later-error.js';
import { AttemptThrottle } from './attempt-throttle.js';

/**
 * Throttles guesses of secrets in three ways: per account and address tightly; per address, against one
 * guesser who tries many accounts; per account loosely, against many addresses that try one account, so
 * that a stranger cannot keep its owner out for long.
 */
@Injectable()
export class SignInThrottle {
  private readonly perPair = new AttemptThrottle({
    freeAttempts: 5,
    firstWaitS: 2,
    maxWaitS: 900,
    forgetAfterS: 3600,
  });
  private readonly perAddress = new AttemptThrottle({
    freeAttempts: 30,
    firstWaitS: 2,
    maxWaitS: 900,
    forgetAfterS: 3600,
  });
  private readonly perAccount = new AttemptThrottle({
    freeAttempts: 30,
    firstWaitS: 1,
    maxWaitS: 30,
    forgetAfterS: 3600,
  });

  /**
   * Counts an attempt.
   *
   * @throws request.too-many with the time to wait
   */
  begin(account: string, address: string, nowS: number = monotonicS()): void {
    const keyed = this.keys(account, address);
    const waitS = Math.max(...keyed.map(([throttle, key]) => throttle.waitS(key, nowS)));
    if (waitS > 0) throw new RetryLaterError(Math.ceil(waitS));
    for (const [throttle, key] of keyed) throttle.begin(key, nowS);
  }

  succeed(account: string, address: string): void {
    this.perPair.succeed(pairKey(account, address));
    this.perAccount.succeed(account);
    // Taken back only: else one right password would clear the guesses at other accounts from this address.
    this.perAddress.undo(address);
  }

  private keys(account: string, address: string): [AttemptThrottle, string][] {
    return [
      [this.perPair, pairKey(account, address)],
      [this.perAddress, address],
      [this.perAccount, account],
    ];
  }
}

function pairKey(account: string, address: string): string {
  return `${account}\n${address}`;
}

/** Seconds on a clock that nobody can set back. */
function monotonicS(): number {
  return performance.now() / 1000;
}
