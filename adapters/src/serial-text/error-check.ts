import { DomainError } from '@cresthold/shared';
import { deviceErrorOf } from './device-errors.js';
import { plainText } from './escaped-text.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import type { TextLink } from './text-link.js';

/** A queue that has more entries is broken; the rest is left for the next check. */
const mostEntries = 20;

type CheckSettings = Pick<
  SerialTextConfiguration,
  'path' | 'errorQuery' | 'errorForm' | 'noError' | 'hasErrorCheckAfterWrite' | 'errorCheckScans'
>;

/** Asks a device for the errors that it keeps. */
export class ErrorCheck {
  /** Whether a command before may have left an error that belongs to no write. */
  mayHoldOthers = false;
  private scans = 0;

  constructor(
    private readonly link: TextLink,
    private readonly settings: CheckSettings,
  ) {}

  get followsWrites(): boolean {
    return this.isPossible && this.settings.hasErrorCheckAfterWrite;
  }

  get isPossible(): boolean {
    return this.settings.errorQuery !== '';
  }

  /** Counts one read. @returns whether a check is due after it */
  isDueAfterScan(): boolean {
    const { errorCheckScans } = this.settings;
    if (!this.isPossible || errorCheckScans === 0) return false;
    this.scans = (this.scans + 1) % errorCheckScans;
    return this.scans === 0;
  }

  /** Drops what earlier queries have left, so that it is not put down to the write that follows. */
  async clearOthers(deadlineMs: number): Promise<void> {
    if (this.mayHoldOthers) await this.run('earlier commands', deadlineMs);
  }

  /**
   * Reads errors until none is left.
   *
   * @param doing what the device was asked, for the message
   * @returns `adapter.refused` with the oldest error in the device's own words, why the check failed, or null
   */
  async run(doing: string, deadlineMs: number): Promise<DomainError | null> {
    let first: string | null = null;
    for (let entry = 0; entry < mostEntries; entry += 1) {
      const command = plainText(this.settings.errorQuery);
      const reply = await this.link.exchange({ command, expectation: { kind: 'line' } }, deadlineMs);
      if (reply instanceof DomainError) {
        this.mayHoldOthers = true;
        return first === null ? reply : this.refused(doing, first);
      }
      const error = typeof reply === 'string' ? deviceErrorOf(reply, this.settings) : null;
      if (error === null) break;
      first ??= error;
      // Reading the event status register clears it: there is nothing to drain.
      if (this.settings.errorForm === 'event-status') break;
    }
    this.mayHoldOthers = false;
    return first === null ? null : this.refused(doing, first);
  }

  private refused(doing: string, error: string): DomainError {
    return new DomainError(
      'adapter.refused',
      `${this.settings.path}, ${doing}: the device reports ${error}.`,
    );
  }
}
