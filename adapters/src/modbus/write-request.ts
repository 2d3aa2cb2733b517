import { DomainError } from '@cresthold/shared';
import { encodeRaw, wireMaskOf, wordsOfRaw } from './codec.js';
import { type ModbusAddress, placeText } from './modbus-address.schema.js';
import type { ModbusRequest } from './modbus-request.js';
import { isWritable, type WriteRun } from './write-planner.js';

/** The words of one value, or why it cannot be written. */
function wordsFor(address: ModbusAddress, value: number): number[] | DomainError {
  const place = placeText(address.unit, address.table, address.address, 1);
  if (!isWritable(address)) {
    return new DomainError('adapter.misconfigured', `${place}: this can only be read.`);
  }
  const raw = encodeRaw(value, address);
  if (typeof raw !== 'number') return new DomainError('adapter.misconfigured', `${place}: ${raw.fault}`);
  return wordsOfRaw(raw, address);
}

/**
 * The request of one run, or the first reason why it cannot be made.
 *
 * @param canReadBack whether runs of registers are read back in the same request
 */
export function writeRequestOf(
  addresses: readonly ModbusAddress[],
  values: ArrayLike<number>,
  run: WriteRun,
  canReadBack: boolean,
): ModbusRequest | DomainError {
  const members = addresses.slice(run.from, run.to);
  const [first] = members;
  if (!first) throw new RangeError('an empty run of writes');
  const words: number[][] = [];
  for (const [offset, member] of members.entries()) {
    const own = wordsFor(member, values[run.from + offset] ?? NaN);
    if (own instanceof DomainError) return own;
    words.push(own);
  }
  const { unit, address } = first;
  if (first.table === 'coil') {
    return { kind: 'write-coils', unit, address, states: words.flat().map((word) => word === 1) };
  }
  if (first.bits) return maskWriteOf(members, words.flat());
  return {
    kind: canReadBack ? 'write-and-read-back' : 'write-registers',
    unit,
    address,
    words: words.flat(),
  };
}

/** One mask write for fields of one register: every bit that belongs to none of them stays as it is. */
function maskWriteOf(members: readonly ModbusAddress[], words: readonly number[]): ModbusRequest {
  const { unit = 0, address = 0 } = members[0] ?? {};
  const fields = members.reduce((mask, member) => mask | wireMaskOf(member), 0);
  const orMask = words.reduce((mask, word) => mask | word, 0);
  return { kind: 'mask-write', unit, address, andMask: ~fields & 0xffff, orMask };
}
