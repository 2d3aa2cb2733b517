import type { DomainError } from '@cresthold/shared';
import type { ReadOutcome, ReadPlan } from '../contract.js';
import { decodeValue } from './codec.js';
import { isTrace, type ModbusAddress } from './modbus-address.schema.js';
import { planReads, type ReadBlock, splitBlock } from './read-planner.js';
import { type ReadRequest, TraceRead } from './trace-read.js';

/** A plan with the buffers of its outcome. It learns: blocks that a device refuses are taken apart. */
export class ModbusReadPlan implements ReadPlan {
  readonly count: number;
  readonly outcome: ReadOutcome;
  /** In the order in which they are asked; changed between requests only. */
  readonly blocks: ReadBlock[];
  /** Read after the blocks, each by itself and in one go. */
  readonly traces: readonly TraceRead[];
  /** Every unit that the plan asks, once. */
  readonly units: readonly number[];

  constructor(addresses: readonly ModbusAddress[], gap: number) {
    this.count = addresses.length;
    this.blocks = planReads(addresses, gap);
    this.traces = addresses.flatMap((address, index) =>
      isTrace(address) ? [new TraceRead(index, address)] : [],
    );
    this.units = [...new Set(addresses.map(({ unit }) => unit))];
    const arrays = new Map(this.traces.map(({ index, values }) => [index, values]));
    this.outcome = {
      values: new Float64Array(this.count).fill(NaN),
      faults: new Array<DomainError | null>(this.count).fill(null),
      ...(arrays.size > 0 && { traces: addresses.map((_, index) => arrays.get(index) ?? null) }),
      lost: null,
    };
  }

  get requests(): number {
    return this.traces.reduce((sum, trace) => sum + trace.requests, this.blocks.length);
  }

  /** What one read of everything puts on the wire. */
  everyRequest(): ReadRequest[] {
    const ofBlocks = this.blocks.map(({ unit, table, address, count }): ReadRequest => ({
      kind: 'read',
      unit,
      table,
      address,
      count,
    }));
    return [...ofBlocks, ...this.traces.flatMap((trace) => trace.everyRequest())];
  }

  /**
   * Takes the values of one block from its answer.
   *
   * @realtime safe: allocates nothing
   */
  accept(block: ReadBlock, payload: Buffer): void {
    for (const member of block.members) {
      this.outcome.values[member.index] = decodeValue(payload, member.at, member.address);
      this.outcome.faults[member.index] = null;
    }
  }

  /** Marks the members of one block as not read; their values are NaN, never an older reading. */
  reject(block: ReadBlock, fault: DomainError): void {
    for (const member of block.members) {
      this.outcome.values[member.index] = NaN;
      this.outcome.faults[member.index] = fault;
    }
  }

  acceptTrace(trace: TraceRead): void {
    this.outcome.faults[trace.index] = null;
  }

  rejectTrace(trace: TraceRead, fault: DomainError): void {
    trace.reject();
    this.outcome.faults[trace.index] = fault;
  }

  /** Marks everything as not read. */
  lose(error: DomainError): void {
    this.outcome.values.fill(NaN);
    this.outcome.faults.fill(error);
    for (const trace of this.traces) trace.reject();
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
