import { type ModbusAddress, widthOf } from './modbus-address.schema.js';

/**
 * Most registers of one write request.
 *
 * @source MODBUS Application Protocol V1.1b3, 6.12: 123 registers
 */
export const mostRegistersPerWrite = 123;

/** Entries `from` (included) to `to` (excluded) of the caller's list that go in one request. */
export interface WriteRun {
  readonly from: number;
  readonly to: number;
}

/**
 * Joins neighbours of the list that are neighbours in the device, in the given order; the order of
 * two writes is never changed. Coils go one by one.
 */
export function planWrites(addresses: readonly ModbusAddress[]): WriteRun[] {
  const runs: WriteRun[] = [];
  let from = 0;
  let registers = 0;
  addresses.forEach((address, index) => {
    const before = addresses[index - 1];
    const width = widthOf(address);
    const doesJoin =
      before !== undefined && areNeighbours(before, address) && registers + width <= mostRegistersPerWrite;
    if (before !== undefined && !doesJoin) {
      runs.push({ from, to: index });
      from = index;
      registers = 0;
    }
    registers += width;
  });
  if (addresses.length > 0) runs.push({ from, to: addresses.length });
  return runs;
}

function areNeighbours(before: ModbusAddress, after: ModbusAddress): boolean {
  return (
    before.table === 'holding-register' &&
    after.table === 'holding-register' &&
    before.unit === after.unit &&
    before.address + widthOf(before) === after.address
  );
}

/** Whether the protocol has a write request for the table. */
export function isWritableTable(table: ModbusAddress['table']): boolean {
  return table === 'coil' || table === 'holding-register';
}
