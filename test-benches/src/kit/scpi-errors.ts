/** Errors of SCPI 1999 (volume 2, chapter 21) that the benches know. */
export const scpiErrors = {
  none: [0, 'No error'],
  syntax: [-102, 'Syntax error'],
  parameterNotAllowed: [-108, 'Parameter not allowed'],
  missingParameter: [-109, 'Missing parameter'],
  undefinedHeader: [-113, 'Undefined header'],
  numeric: [-120, 'Numeric data error'],
  execution: [-200, 'Execution error'],
  settingsConflict: [-221, 'Settings conflict'],
  outOfRange: [-222, 'Data out of range'],
  hardware: [-240, 'Hardware error'],
  queueOverflow: [-350, 'Queue overflow'],
} as const satisfies Record<string, readonly [number, string]>;

export type ScpiErrorName = keyof typeof scpiErrors;

/** Bits of the standard event status register; IEEE 488.2, section 11.5.1. */
export const esrBits = {
  operationComplete: 1,
  queryError: 4,
  deviceError: 8,
  executionError: 16,
  commandError: 32,
  powerOn: 128,
};

/** Errors that wait to be asked for; more than this many, and the last becomes −350. */
const queueLength = 16;

/** Error queue and event status of an instrument. */
export class ScpiStatus {
  private queue: ScpiErrorName[] = [];
  private esr = esrBits.powerOn;
  /** Masks that a host has set. */
  ese = 0;
  sre = 0;

  /** Notes an error and sets the event bit of its class. */
  raise(error: ScpiErrorName): void {
    const [code] = scpiErrors[error];
    if (code > -200) this.esr |= esrBits.commandError;
    else if (code > -300) this.esr |= esrBits.executionError;
    else this.esr |= esrBits.deviceError;
    if (this.queue.length < queueLength) this.queue.push(error);
    else this.queue[queueLength - 1] = 'queueOverflow';
  }

  complete(): void {
    this.esr |= esrBits.operationComplete;
  }

  /** The oldest error as `code,"text"`, taken off the queue. */
  nextError(): string {
    const [code, text] = scpiErrors[this.queue.shift() ?? 'none'];
    return `${code},"${text}"`;
  }

  /** Event status; reading clears it. */
  takeEsr(): number {
    const esr = this.esr;
    this.esr = 0;
    return esr;
  }

  /** Status byte: error queue not empty (4), event summary (32), service request (64). */
  get statusByte(): number {
    const summary = (this.queue.length > 0 ? 4 : 0) | (this.esr & this.ese ? 32 : 0);
    return summary | (summary & this.sre ? 64 : 0);
  }

  clear(): void {
    this.queue = [];
    this.esr = 0;
  }
}
