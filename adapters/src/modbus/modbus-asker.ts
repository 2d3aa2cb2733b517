import { DomainError } from '@cresthold/shared';
import { isBusy } from './exception-codes.js';
import type { LinkOutcome, ModbusExchanger } from './modbus-link.js';
import { ModbusRefusal, type ModbusRequest } from './modbus-request.js';
import type { UnitWatch } from './unit-watch.js';

export interface AskerOptions {
  /** A monotonic clock. */
  nowMs: () => number;
  /** Time that a request and its good answer take on the wire. */
  wireMs: (request: ModbusRequest) => number;
}

/** Waits before a busy device is asked again: this long, then twice as long each time, up to the second. */
const firstPauseMs = 10;
const mostPauseMs = 160;

/** Asks one request with the patience that its unit is granted, and again where the device is busy. */
export class ModbusAsker {
  constructor(
    readonly link: ModbusExchanger,
    readonly watch: UnitWatch,
    private readonly options: AskerOptions,
  ) {}

  nowMs(): number {
    return this.options.nowMs();
  }

  /**
   * @param deadlineMs when the whole call must be over
   * @returns null where no time was left to ask
   */
  async ask(request: ModbusRequest, deadlineMs: number): Promise<LinkOutcome | null> {
    const patienceMs = this.watch.timeoutMs(request.unit) + this.options.wireMs(request);
    const busyUntilMs = Math.min(deadlineMs, this.nowMs() + patienceMs);
    let outcome: LinkOutcome | null = null;
    for (let pauseMs = firstPauseMs; ; pauseMs = Math.min(2 * pauseMs, mostPauseMs)) {
      if (this.link.lost) return this.link.lost;
      const leftMs = deadlineMs - this.nowMs();
      if (leftMs < 1) return outcome;
      outcome = await this.link.exchange(request, Math.ceil(Math.min(leftMs, patienceMs)));
      this.note(request.unit, outcome, leftMs >= patienceMs / 2);
      if (!isBusyRefusal(outcome) || this.nowMs() + pauseMs >= busyUntilMs) return outcome;
      await this.link.pause(pauseMs);
    }
  }

  /** A silence counts against a unit only where the unit had time to answer. */
  private note(unit: number, outcome: LinkOutcome, hadTime: boolean): void {
    if (this.link.lost) return;
    if (!isSilence(outcome)) this.watch.answered(unit);
    else if (hadTime) this.watch.wasSilent(unit, this.nowMs());
  }
}

export function isSilence(outcome: LinkOutcome): outcome is DomainError {
  return outcome instanceof DomainError && outcome.code === 'adapter.timeout';
}

function isBusyRefusal(outcome: LinkOutcome): boolean {
  return outcome instanceof ModbusRefusal && isBusy(outcome.exceptionCode);
}
