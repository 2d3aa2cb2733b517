import { DomainError } from '@cresthold/shared';
import type { ErrorCheck } from './error-check.js';
import { showText } from './escaped-text.js';
import { fitsPattern } from './pattern.js';
import { valueOf } from './serial-text-plan.js';
import { factsOf, placeOf, type TextAddress, writeCommandOf } from './text-address.js';
import type { TextLink } from './text-link.js';

/** Writes values and finds out whether the device took them. */
export class TextWriter {
  /** Written since the last check found no error; only kept where a check follows scans. */
  private readonly suspects = new Set<TextAddress>();
  /** What a later check found, to be told at the next write of the same channel. */
  private readonly blamed = new Map<TextAddress, DomainError>();

  constructor(
    private readonly link: TextLink,
    private readonly port: string,
    private readonly errors: ErrorCheck,
  ) {}

  /** @returns null where the device took the value */
  async write(address: TextAddress, value: number, deadlineMs: number): Promise<DomainError | null> {
    if (this.link.lost) return this.link.lost;
    const command = writeCommandOf(address, value);
    if (typeof command !== 'string') {
      const message = `${this.port}, ${placeOf(address)}: ${command.fault}.`;
      return new DomainError('adapter.misconfigured', message);
    }
    if (this.errors.followsWrites) await this.errors.clearOthers(deadlineMs);
    const sent = await this.send(address, command, deadlineMs);
    const reported = await this.reportedAfter(command, deadlineMs);
    const taken = sent ?? reported;
    const fault =
      taken === null && address.given.hasReadback
        ? await this.readBack(address, value, command, deadlineMs)
        : reported?.code === 'adapter.refused'
          ? reported
          : taken;
    const earlier = this.blamed.get(address);
    this.blamed.delete(address);
    if (this.errors.isPossible && !this.errors.followsWrites) this.suspects.add(address);
    return this.link.lost ?? fault ?? earlier ?? null;
  }

  /** Puts an error that was found later down to the writes since the check before. @returns false where there was none */
  blame(fault: DomainError): boolean {
    const hasSuspects = this.suspects.size > 0;
    for (const address of this.suspects) {
      const message = `Reported after an earlier write of this channel: ${fault.message}`;
      this.blamed.set(address, new DomainError(fault.code, message));
    }
    this.suspects.clear();
    return hasSuspects;
  }

  /** Asked after a failed write too: an entry that stayed in the queue would be put down to the next write. */
  private async reportedAfter(command: string, deadlineMs: number): Promise<DomainError | null> {
    if (!this.errors.followsWrites || this.link.lost) return null;
    return this.errors.run(`"${command}"`, deadlineMs);
  }

  private async send(address: TextAddress, command: string, deadlineMs: number): Promise<DomainError | null> {
    const { acknowledgement } = address.given;
    const expectation = acknowledgement === '' ? null : ({ kind: 'line' } as const);
    const reply = await this.link.exchange({ command, expectation }, deadlineMs);
    if (reply instanceof DomainError) {
      if (reply.code !== 'adapter.timeout') return reply;
      return new DomainError(reply.code, `${reply.message} The write may have been carried out or not.`);
    }
    if (typeof reply !== 'string' || acknowledgement === '' || fitsPattern(reply, acknowledgement))
      return null;
    const message = `${this.port}, "${command}": the device answered "${showText(reply)}", not "${acknowledgement}".`;
    return new DomainError('adapter.refused', message);
  }

  private async readBack(
    address: TextAddress,
    value: number,
    command: string,
    deadlineMs: number,
  ): Promise<DomainError | null> {
    const { query, expectation } = address;
    const reply = await this.link.exchange({ command: query ?? '', expectation }, deadlineMs);
    if (reply instanceof DomainError) return reply;
    const held = valueOf(reply, address, null);
    if (typeof held !== 'number') {
      return new DomainError(
        'adapter.corrupt',
        `${this.port}, ${placeOf(address)}: no valid reply: ${held.fault}.`,
      );
    }
    // Half a step of rounding, and what the device's own digits and the arithmetic add.
    const slack = address.given.readbackTolerance + factsOf(address).quantum / 2 + Math.abs(value) * 1e-9;
    if (Math.abs(held - value) <= slack) return null;
    const message = `${this.port}, "${command}": the device holds ${held}, not ${value}.`;
    return new DomainError('adapter.refused', message);
  }
}
