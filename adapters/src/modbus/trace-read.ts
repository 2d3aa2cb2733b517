import { decodeValue } from './codec.js';
import { type ModbusAddress, registersOfType, widthOf } from './modbus-address.schema.js';
import type { ModbusRequest } from './modbus-request.js';
import { protocolReadLimits } from './read-planner.js';

export type ReadRequest = Extract<ModbusRequest, { kind: 'read' }>;

/** A trace with the requests that it takes and the buffer of its values. */
export class TraceRead {
  /** Engineering values of the last good read; NaN after a failed one. */
  readonly values: Float64Array;
  /** Of whole values each, in the order of the trace. */
  readonly chunks: readonly ReadRequest[];
  /** Reads the stamp register; null where the address names none. */
  readonly stamp: ReadRequest | null;
  private filled = 0;

  constructor(
    /** Index in the caller's list. */
    readonly index: number,
    readonly address: ModbusAddress,
  ) {
    this.values = new Float64Array(address.points ?? 1).fill(NaN);
    this.chunks = chunksOf(address);
    this.stamp =
      address.stamp === undefined ? null : { ...readAt(address), address: address.stamp, count: 1 };
  }

  get requests(): number {
    return this.chunks.length + (this.stamp ? 2 : 0);
  }

  everyRequest(): ReadRequest[] {
    return this.stamp ? [this.stamp, ...this.chunks, this.stamp] : [...this.chunks];
  }

  begin(): void {
    this.filled = 0;
  }

  /** Takes the payload of the next chunk. */
  accept(payload: Buffer): void {
    const step = 2 * registersOfType[this.address.type];
    for (let at = 0; at + step <= payload.length; at += step) {
      this.values[this.filled] = decodeValue(payload, at, this.address);
      this.filled += 1;
    }
  }

  /** Nothing of a trace that was not read to its end is to be seen. */
  reject(): void {
    this.values.fill(NaN);
  }
}

const readAt = ({ unit, table }: ModbusAddress): Pick<ReadRequest, 'kind' | 'unit' | 'table'> => ({
  kind: 'read',
  unit,
  table,
});

function chunksOf(address: ModbusAddress): ReadRequest[] {
  const width = registersOfType[address.type];
  const mostRegisters = protocolReadLimits.registers - (protocolReadLimits.registers % width);
  const chunks: ReadRequest[] = [];
  const end = address.address + widthOf(address);
  for (let at = address.address; at < end; at += mostRegisters) {
    chunks.push({ ...readAt(address), address: at, count: Math.min(mostRegisters, end - at) });
  }
  return chunks;
}
