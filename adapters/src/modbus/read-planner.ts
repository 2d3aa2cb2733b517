import {
  isBitTable,
  isTrace,
  type ModbusAddress,
  type ModbusTable,
  widthOf,
} from './modbus-address.schema.js';

/** One address of a plan inside its block. */
export interface ReadMember {
  /** Index in the caller's list. */
  readonly index: number;
  readonly address: ModbusAddress;
  /** Place in the answer's payload: bytes for registers, bits for bit tables. */
  readonly at: number;
}

/** One request: a run of one table of one unit. */
export interface ReadBlock {
  readonly unit: number;
  readonly table: ModbusTable;
  readonly address: number;
  /** Registers or bits. */
  readonly count: number;
  readonly members: readonly ReadMember[];
}

/**
 * Most that one read request may ask for.
 *
 * @source MODBUS Application Protocol V1.1b3, 6.1 to 6.4: 2000 bits, 125 registers
 */
export interface ReadLimits {
  bits: number;
  registers: number;
}

export const protocolReadLimits: ReadLimits = { bits: 2000, registers: 125 };

type Indexed = readonly [index: number, address: ModbusAddress];

/**
 * Joins addresses into the fewest requests, per unit and table. Traces are left out: they go by themselves.
 *
 * @param gap most registers or bits, which nobody asked for, that may lie between two joined addresses
 * @returns blocks in the order of unit, table, address; every address is wholly inside one block
 */
export function planReads(
  addresses: readonly ModbusAddress[],
  gap: number,
  limits: ReadLimits = protocolReadLimits,
): ReadBlock[] {
  const groups = new Map<string, Indexed[]>();
  addresses.forEach((address, index) => {
    if (isTrace(address)) return;
    const key = `${String(address.unit).padStart(3, '0')} ${address.table}`;
    const group = groups.get(key);
    if (group) group.push([index, address]);
    else groups.set(key, [[index, address]]);
  });
  return [...groups.keys()].sort().flatMap((key) => planGroup(groups.get(key) ?? [], gap, limits));
}

/** Taking each block as far as it goes from the left is minimal: no later start could reach further. */
function planGroup(group: Indexed[], gap: number, limits: ReadLimits): ReadBlock[] {
  const sorted = [...group].sort((a, b) => a[1].address - b[1].address || widthOf(b[1]) - widthOf(a[1]));
  const blocks: ReadBlock[] = [];
  let run: Indexed[] = [];
  let start = 0;
  let end = 0;
  for (const item of sorted) {
    const address = item[1];
    const most = isBitTable(address.table) ? limits.bits : limits.registers;
    const itemEnd = address.address + widthOf(address);
    const doesFit = run.length > 0 && address.address - end <= gap && Math.max(end, itemEnd) - start <= most;
    if (!doesFit) {
      if (run.length > 0) blocks.push(blockOf(run));
      run = [];
      start = address.address;
      end = start;
    }
    run.push(item);
    end = Math.max(end, itemEnd);
  }
  if (run.length > 0) blocks.push(blockOf(run));
  return blocks;
}

/** The block that holds the given members (of one unit and table, sorted by address). */
function blockOf(run: readonly Indexed[]): ReadBlock {
  const [first] = run;
  if (!first) throw new Error('a block needs a member');
  const { unit, table, address: start } = first[1];
  const end = Math.max(...run.map(([, address]) => address.address + widthOf(address)));
  const placeWidth = isBitTable(table) ? 1 : 2;
  return {
    unit,
    table,
    address: start,
    count: end - start,
    members: run.map(([index, address]) => ({
      index,
      address,
      at: (address.address - start) * placeWidth,
    })),
  };
}

/**
 * Takes a refused block apart, so that one address that the device does not have spoils no other:
 * first at the places that nobody asked for, then in halves.
 *
 * @returns the parts, or nothing where the block has one member only
 */
export function splitBlock(block: ReadBlock): ReadBlock[] {
  if (block.members.length < 2) return [];
  const items = block.members.map(({ index, address }): Indexed => [index, address]);
  const parts = planGroup(items, 0, protocolReadLimits);
  if (parts.length > 1) return parts;
  const middle = items.length >>> 1;
  return [blockOf(items.slice(0, middle)), blockOf(items.slice(middle))];
}
