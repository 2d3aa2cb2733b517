import { DomainError } from '@cresthold/shared';
import type { WriteOutcome } from '../contract.js';
import { type ModbusAddress, placeText, widthOf } from './modbus-address.schema.js';
import { isSilence, type ModbusAsker } from './modbus-asker.js';
import type { LinkOutcome } from './modbus-link.js';
import type { ModbusRequest } from './modbus-request.js';
import { isSplittable } from './read-runner.js';
import type { WriteRun } from './write-planner.js';
import { writeRequestOf } from './write-request.js';

/** A prepared write: what each entry sends, and which entries go together. */
export interface WritePlan {
  /** The caller's own objects, to see whether the list is still the one that was prepared. */
  readonly source: readonly ModbusAddress[];
  readonly addresses: readonly ModbusAddress[];
  readonly runs: readonly WriteRun[];
  /** Number of different units in this run and those after it. */
  readonly unitsFrom: readonly number[];
}

export interface WriteOptions {
  timeoutMs: number;
  /** Whether runs of registers are read back in the same request. */
  readBack: boolean;
}

/** One write of a list of values, from its first request to its outcome. Silent units are always asked. */
export class WriteRunner {
  readonly outcome: WriteOutcome;
  private readonly silentHere = new Set<number>();

  constructor(
    private readonly asker: ModbusAsker,
    private readonly plan: WritePlan,
    private readonly values: ArrayLike<number>,
    private readonly options: WriteOptions,
  ) {
    this.outcome = { faults: new Array<null>(plan.addresses.length).fill(null), lost: null };
  }

  async run(): Promise<WriteOutcome> {
    const deadlineMs = this.asker.nowMs() + this.options.timeoutMs;
    for (const [index, run] of this.plan.runs.entries()) {
      // Each unit gets its share of the time left, so that a silent one cannot keep the others from theirs.
      const nowMs = this.asker.nowMs();
      await this.writeRun(run, nowMs + (deadlineMs - nowMs) / (this.plan.unitsFrom[index] ?? 1));
    }
    return this.outcome;
  }

  private async writeRun(run: WriteRun, deadlineMs: number): Promise<void> {
    const { addresses } = this.plan;
    const request = writeRequestOf(addresses, this.values, run, this.options.readBack);
    const answer =
      request instanceof DomainError ? request : await this.perform(request, addresses, run, deadlineMs);
    const { lost } = this.asker.link;
    if (lost) this.outcome.lost = lost;
    if (Buffer.isBuffer(answer)) {
      if (!(request instanceof DomainError)) this.compare(request, answer, run);
      return;
    }
    const isSingle = run.to - run.from === 1;
    const mayHelpSingly = request instanceof DomainError || isSplittable(answer);
    if (isSingle || !mayHelpSingly || lost) {
      this.outcome.faults.fill(answer, run.from, run.to);
      return;
    }
    for (let index = run.from; index < run.to; index += 1) {
      await this.writeRun({ from: index, to: index + 1 }, deadlineMs);
    }
  }

  private perform(
    request: ModbusRequest,
    addresses: readonly ModbusAddress[],
    run: WriteRun,
    deadlineMs: number,
  ): Promise<LinkOutcome> {
    const lacksMaskWrite = addresses.slice(run.from, run.to).some((a) => a.hasMaskWrite === false);
    return request.kind === 'mask-write' && lacksMaskWrite
      ? this.readModifyWrite(request, deadlineMs)
      : this.ask(request, deadlineMs);
  }

  /** For devices without function code 22. Nothing else goes out in between, on this line. */
  private async readModifyWrite(
    { unit, address, andMask, orMask }: Extract<ModbusRequest, { kind: 'mask-write' }>,
    deadlineMs: number,
  ): Promise<LinkOutcome> {
    const read = { kind: 'read', unit, table: 'holding-register', address, count: 1 } as const;
    const held = await this.ask(read, deadlineMs);
    if (!Buffer.isBuffer(held)) return held;
    const word = (held.readUInt16BE(0) & andMask) | (orMask & ~andMask);
    return this.ask({ kind: 'write-registers', unit, address, words: [word & 0xffff] }, deadlineMs);
  }

  private async ask(request: ModbusRequest, deadlineMs: number): Promise<LinkOutcome> {
    const { unit } = request;
    if (this.silentHere.has(unit) && this.asker.watch.silences(unit) > 1) {
      return new DomainError(
        'adapter.timeout',
        `Unit ${unit} did not answer an earlier request of this call.`,
      );
    }
    const answer = await this.asker.ask(request, deadlineMs);
    if (answer === null) {
      const text = `Not asked: earlier requests used up the ${this.options.timeoutMs} ms of this call.`;
      return new DomainError('adapter.timeout', text);
    }
    if (isSilence(answer)) this.silentHere.add(unit);
    return answer;
  }

  /** Faults the entries for which the device holds something else than was written. */
  private compare(request: ModbusRequest, held: Buffer, run: WriteRun): void {
    if (request.kind !== 'write-and-read-back') return;
    let at = 0;
    for (let index = run.from; index < run.to; index += 1) {
      const address = this.plan.addresses[index];
      if (!address) return;
      const width = widthOf(address);
      const written = request.words.slice(at, at + width);
      const found = written.map((_, offset) => held.readUInt16BE(2 * (at + offset)));
      at += width;
      if (written.every((word, offset) => word === found[offset])) continue;
      const place = placeText(address.unit, address.table, address.address, width);
      const text = `${place}: the device holds ${hexWords(found)} instead of ${hexWords(written)}.`;
      this.outcome.faults[index] = new DomainError('adapter.refused', text);
    }
  }
}

/** E.g. `0x01F4 0x0000`. */
export function hexWords(words: readonly number[]): string {
  return words.map((word) => `0x${word.toString(16).toUpperCase().padStart(4, '0')}`).join(' ');
}
