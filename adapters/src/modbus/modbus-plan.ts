import type { DomainError } from '@cresthold/shared';
import type { ReadOutcome, ReadPlan } from '../contract.js';
import { decodeValue } from './codec.js';
import type { ModbusAddress } from './modbus-address.schema.js';
import { planReads, type ReadBlock, splitBlock } from './read-planner.js';

/** A plan with the buffers of its outcome. It learns: blocks that a device refuses are taken apart. */
export class ModbusReadPlan implements ReadPlan {
  readonly count: number;
  readonly outcome: ReadOutcome;
  /** In the order in which they are asked; changed between requests only. */
  readonly blocks: ReadBlock[];

  constructor(addresses: readonly ModbusAddress[], gap: number) {
    this.count = addresses.length;
    this.blocks = planReads(addresses, gap);
    this.outcome = {
      values: new Float64Array(this.count).fill(NaN),
      faults: new Array<DomainError | null>(this.count).fill(null),
      lost: null,
    };
  }

  get requests(): number {
    return this.blocks.length;
  }

  /**
   * Takes the values of one block from its answer, or its fault.
   *
   * @returns false where the device stayed silent
   * @realtime safe: allocates nothing
   */
  settle(block: ReadBlock, answer: Buffer | DomainError): boolean {
    if (Buffer.isBuffer(answer)) {
      this.accept(block, answer);
      return true;
    }
    this.reject(block, answer);
    return answer.code !== 'adapter.timeout';
  }

  private accept(block: ReadBlock, payload: Buffer): void {
    for (const member of block.members) {
      this.outcome.values[member.index] = decodeValue(payload, member.at, member.address);
      this.outcome.faults[member.index] = null;
    }
  }

  /** Marks the members of one block as not read; their values are NaN, never an older reading. */
  private reject(block: ReadBlock, fault: DomainError): void {
    for (const member of block.members) {
      this.outcome.values[member.index] = NaN;
      this.outcome.faults[member.index] = fault;
    }
  }

  /** Marks `count` blocks from a position on as not read. */
  rejectRest(position: number, count: number, fault: DomainError): void {
    for (const block of this.blocks.slice(position, position + count)) this.reject(block, fault);
  }

  /** Marks everything as not read. */
  lose(error: DomainError): void {
    this.outcome.values.fill(NaN);
    this.outcome.faults.fill(error);
    this.outcome.lost = error;
  }

  /** Replaces a refused block by its parts. @returns number of blocks gained; 0 where it has no parts */
  takeApart(position: number): number {
    const block = this.blocks[position];
    const parts = block ? splitBlock(block) : [];
    if (parts.length === 0) return 0;
    this.blocks.splice(position, 1, ...parts);
    return parts.length - 1;
  }

  /** Asks this block last from now on, so that a silent unit does not eat the time of the others. */
  putLast(position: number): void {
    this.blocks.push(...this.blocks.splice(position, 1));
  }
}
