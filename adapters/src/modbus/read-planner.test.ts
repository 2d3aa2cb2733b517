import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type ModbusAddress, modbusAddressSchema, widthOf } from './modbus-address.schema.js';
import { planReads, type ReadBlock, splitBlock } from './read-planner.js';

const holding = (address: number, type = 'u16', unit = 1): ModbusAddress =>
  modbusAddressSchema.parse({ unit, table: 'holding-register', address, type });
const shape = (blocks: ReadBlock[]): [number, number][] =>
  blocks.map(({ address, count }) => [address, count]);

describe('planReads', () => {
  it('joins neighbours and keeps others apart when no gap is allowed', () => {
    const addresses = [holding(12), holding(10, 'f32'), holding(14)];
    expect(shape(planReads(addresses, 0))).toEqual([
      [10, 3],
      [14, 1],
    ]);
    expect(shape(planReads(addresses, 1))).toEqual([[10, 5]]);
  });

  it('never asks for more than the protocol allows', () => {
    const registers = Array.from({ length: 300 }, (_, index) => holding(index));
    expect(planReads(registers, 0).map(({ count }) => count)).toEqual([125, 125, 50]);
    const coils = Array.from({ length: 2001 }, (_, address) =>
      modbusAddressSchema.parse({ table: 'coil', address, type: 'bit' }),
    );
    expect(planReads(coils, 0).map(({ count }) => count)).toEqual([2000, 1]);
  });

  it('does not tear a 32-bit value at the edge of a request', () => {
    const addresses = [...Array.from({ length: 124 }, (_, index) => holding(index)), holding(124, 'u32')];
    expect(shape(planReads(addresses, 0))).toEqual([
      [0, 124],
      [124, 2],
    ]);
  });

  it('never joins units or tables', () => {
    const input = modbusAddressSchema.parse({ table: 'input-register', address: 1, type: 'u16' });
    expect(planReads([holding(0), holding(1, 'u16', 2), input], 100)).toHaveLength(3);
  });

  it('asks once for an address that is named twice', () => {
    const [block, ...others] = planReads([holding(5), holding(5), holding(5, 'u32')], 0);
    expect(others).toEqual([]);
    expect(block).toMatchObject({ address: 5, count: 2 });
    expect(block?.members.map(({ index }) => index).sort()).toEqual([0, 1, 2]);
  });
});

const limits = { bits: 5, registers: 5 };
const anyAddresses = fc.array(
  fc.record({ at: fc.nat(14), type: fc.constantFrom('u16', 'f32'), unit: fc.constantFrom(1, 2) }),
  { maxLength: 7 },
);
const toAddresses = (items: { at: number; type: string; unit: number }[]): ModbusAddress[] =>
  items.map(({ at, type, unit }) => holding(at, type, unit));

/** Whether one request may fetch the given addresses: by the definition, not by the planner's way. */
function isOneRequest(addresses: readonly ModbusAddress[], gap: number): boolean {
  const start = Math.min(...addresses.map(({ address }) => address));
  const end = Math.max(...addresses.map((address) => address.address + widthOf(address)));
  if (new Set(addresses.map(({ unit }) => unit)).size > 1 || end - start > limits.registers) return false;
  let unasked = 0;
  for (let at = start; at < end; at += 1) {
    const isAsked = addresses.some((a) => a.address <= at && at < a.address + widthOf(a));
    unasked = isAsked ? 0 : unasked + 1;
    if (unasked > gap) return false;
  }
  return true;
}

/** Fewest requests by trying every way to share the addresses out. */
function fewestRequests(addresses: readonly ModbusAddress[], gap: number): number {
  const [first, ...others] = addresses;
  if (!first) return 0;
  let fewest = Infinity;
  for (let choice = 0; choice < 2 ** others.length; choice += 1) {
    const together = [first, ...others.filter((_, index) => (choice >>> index) & 1)];
    if (!isOneRequest(together, gap)) continue;
    const rest = others.filter((_, index) => !((choice >>> index) & 1));
    fewest = Math.min(fewest, 1 + fewestRequests(rest, gap));
  }
  return fewest;
}

describe('every plan', () => {
  it('has the fewest requests that gap and maxima allow', () => {
    fc.assert(
      fc.property(anyAddresses, fc.nat(3), (items, gap) => {
        const addresses = toAddresses(items);
        expect(planReads(addresses, gap, limits)).toHaveLength(fewestRequests(addresses, gap));
      }),
    );
  });

  it('covers each address once, wholly, at its place, in requests that are allowed', () => {
    fc.assert(
      fc.property(anyAddresses, fc.nat(3), (items, gap) => {
        const addresses = toAddresses(items);
        const blocks = planReads(addresses, gap, limits);
        const indices = blocks.flatMap((block) => block.members.map(({ index }) => index));
        expect(indices.sort((a, b) => a - b)).toEqual(addresses.map((_, index) => index));
        for (const block of blocks) {
          expect(
            isOneRequest(
              block.members.map(({ address }) => address),
              gap,
            ),
          ).toBe(true);
          for (const { index, address, at } of block.members) {
            expect(address).toBe(addresses[index]);
            expect(block.address + at / 2).toBe(address.address);
            expect(at / 2 + widthOf(address)).toBeLessThanOrEqual(block.count);
          }
        }
      }),
    );
  });

  it('can be taken apart down to single addresses without losing one', () => {
    fc.assert(
      fc.property(anyAddresses, (items) => {
        const open = planReads(toAddresses(items), 3, limits);
        const single: number[] = [];
        for (let block = open.pop(); block; block = open.pop()) {
          const parts = splitBlock(block);
          if (parts.length === 0) single.push(...block.members.map(({ index }) => index));
          open.push(...parts);
        }
        expect(single.sort((a, b) => a - b)).toEqual(items.map((_, index) => index));
      }),
    );
  });
});
