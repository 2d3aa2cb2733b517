import { wireMaskOf } from './codec.js';
import { isTrace, type ModbusAddress, widthOf } from './modbus-address.schema.js';

/**
 * Most that one write request carries.
 *
 * @source MODBUS Application Protocol V1.1b3, 6.11, 6.12, 6.17: 1968 coils; 123 registers, 121 where the same
 * request reads (function code 23)
 */
export interface WriteLimits {
  coils: number;
  registers: number;
}

export const protocolWriteLimits: WriteLimits = { coils: 1968, registers: 123 };
export const readBackWriteLimits: WriteLimits = { coils: 1968, registers: 121 };

/** Entries `from` (included) to `to` (excluded) of the caller's list that go in one request. */
export interface WriteRun {
  readonly from: number;
  readonly to: number;
}

/**
 * Joins neighbours of the list that are neighbours in the device, in the given order; the order of
 * two writes is never changed. Bit fields join where they lie in one register and do not overlap.
 */
export function planWrites(
  addresses: readonly ModbusAddress[],
  limits: WriteLimits = protocolWriteLimits,
): WriteRun[] {
  const runs: WriteRun[] = [];
  let from = 0;
  addresses.forEach((address, index) => {
    if (index === from || doesJoin(addresses.slice(from, index), address, limits)) return;
    runs.push({ from, to: index });
    from = index;
  });
  if (addresses.length > 0) runs.push({ from, to: addresses.length });
  return runs;
}

function doesJoin(run: readonly ModbusAddress[], address: ModbusAddress, limits: WriteLimits): boolean {
  const before = run.at(-1);
  if (!before || before.unit !== address.unit || before.table !== address.table) return false;
  if (!isWritable(before) || !isWritable(address)) return false;
  if (before.bits || address.bits) return areFieldsOfOneRegister(run, address);
  const most = address.table === 'coil' ? limits.coils : limits.registers;
  const width = run.reduce((sum, member) => sum + widthOf(member), widthOf(address));
  return before.address + widthOf(before) === address.address && width <= most;
}

function areFieldsOfOneRegister(run: readonly ModbusAddress[], address: ModbusAddress): boolean {
  return (
    address.bits !== undefined &&
    run.every(
      (member) =>
        member.bits !== undefined &&
        member.address === address.address &&
        (wireMaskOf(member) & wireMaskOf(address)) === 0,
    )
  );
}

/** Whether the protocol has a write request for the table, and the address is one value. */
export function isWritable(address: Pick<ModbusAddress, 'table' | 'points'>): boolean {
  return (address.table === 'coil' || address.table === 'holding-register') && !isTrace(address);
}
