import { describe, expect, it } from 'vitest';
import { type ModbusAddress, modbusAddressSchema } from './modbus-address.schema.js';
import { ModbusSession, type ModbusSessionOptions } from './modbus-session.js';
import { SimulatedBus } from './testing/simulated-bus.js';

/** One exchange of eight registers at 19 200 baud 8E1: 29 characters and two silent intervals, rounded up. */
const exchangeMs = 21;
const eight = [1, 2, 3, 4, 5, 6, 7, 8];
const addressOf = (unit: number): ModbusAddress =>
  modbusAddressSchema.parse({ unit, table: 'holding-register', address: 0, type: 'u16' });

function sessionOn(bus: SimulatedBus, more: Partial<ModbusSessionOptions> = {}): ModbusSession {
  return new ModbusSession(bus, {
    addressSchema: modbusAddressSchema,
    timeoutMs: 5000,
    unitTimeoutMs: 200,
    units: [],
    mostBackOffMs: 15_000,
    gap: 0,
    readBack: false,
    nowMs: () => bus.nowMs,
    ...more,
  });
}

/** Scans of the given units within a time, one straight after the other. */
async function scansWithin(units: readonly number[], dead: readonly number[], spanMs: number) {
  const bus = new SimulatedBus(exchangeMs);
  dead.forEach((unit) => bus.dead.add(unit));
  const session = sessionOn(bus);
  const plan = session.planRead(units.map(addressOf));
  let scans = 0;
  let strays = 0;
  while (bus.nowMs < spanMs) {
    const { faults, values } = await session.read(plan);
    // Where a unit lives it is read in every scan but the first few, in which the dead ones are found out.
    if (faults.every((fault, index) => (fault !== null) === dead.includes(units[index] ?? 0))) scans += 1;
    faults.forEach((fault, index) => (strays += Number(Number.isNaN(values[index]) !== (fault !== null))));
  }
  // A value exactly where there is no fault; counted, since an expectation for each would cost seconds.
  expect(strays).toBe(0);
  return { scans, bus };
}

describe('a line with eight units of which two are dead', () => {
  it('keeps at least 90 % of the scans that the six have alone, from the moment on at which they die', async () => {
    const alone = await scansWithin([3, 4, 5, 6, 7, 8], [], 60_000);
    const beside = await scansWithin(eight, [1, 2], 60_000);
    expect(beside.scans / alone.scans).toBeGreaterThanOrEqual(0.9);
  });

  it('keeps 97 % once the dead ones are known', async () => {
    const alone = await scansWithin([3, 4, 5, 6, 7, 8], [], 600_000);
    const beside = await scansWithin(eight, [1, 2], 600_000);
    expect(beside.scans / alone.scans).toBeGreaterThanOrEqual(0.97);
  });

  it('reports the channels of the dead ones as timeouts, with when they are asked again', async () => {
    const bus = new SimulatedBus(exchangeMs);
    [1, 2].forEach((unit) => bus.dead.add(unit));
    const session = sessionOn(bus);
    const plan = session.planRead(eight.map(addressOf));
    for (let scan = 0; scan < 10; scan += 1) {
      const { faults } = await session.read(plan);
      expect(faults.map((fault) => fault?.code)).toEqual([
        'adapter.timeout',
        'adapter.timeout',
        ...Array<undefined>(6).fill(undefined),
      ]);
    }
    const { faults } = await session.read(plan);
    expect(faults[0]?.message).toMatch(
      /^Unit 1 did not answer the last 2 requests: asked again in \d\.\d s\.$/,
    );
  });

  it('asks a dead one after growing delays, and never later than the longest', async () => {
    const { bus } = await scansWithin(eight, [1, 2], 90_000);
    // Asked at once, at once again, then after 4, 8, 15, 15 … s.
    expect(bus.asked.get(1)).toBeGreaterThanOrEqual(7);
    expect(bus.asked.get(1)).toBeLessThanOrEqual(9);
  });

  it('reads a unit again that comes back, within the longest back-off', async () => {
    const bus = new SimulatedBus(exchangeMs);
    bus.dead.add(1);
    const session = sessionOn(bus);
    const plan = session.planRead(eight.map(addressOf));
    while (bus.nowMs < 60_000) await session.read(plan);
    bus.dead.delete(1);
    const backMs = bus.nowMs;
    while ((await session.read(plan)).faults[0] !== null) expect(bus.nowMs).toBeLessThan(backMs + 16_000);
    expect(bus.asked.get(1)).toBeGreaterThan(1);
  });
});

describe('a silent unit', () => {
  it('that is alone on its line is asked in every read', async () => {
    const bus = new SimulatedBus(exchangeMs);
    bus.dead.add(1);
    const session = sessionOn(bus);
    const plan = session.planRead([addressOf(1)]);
    for (let scan = 0; scan < 5; scan += 1) await session.read(plan);
    expect(bus.asked.get(1)).toBe(5);
  });

  it('is always asked to write, whatever its back-off', async () => {
    const bus = new SimulatedBus(exchangeMs);
    bus.dead.add(1);
    const session = sessionOn(bus);
    const plan = session.planRead([addressOf(1), addressOf(2)]);
    for (let scan = 0; scan < 5; scan += 1) await session.read(plan);
    const before = bus.asked.get(1) ?? 0;
    bus.dead.delete(1);
    expect(await session.write([addressOf(1)], [5])).toEqual({ faults: [null], lost: null });
    expect(bus.asked.get(1)).toBe(before + 1);
    // Its answer to the write ends the back-off.
    expect((await session.read(plan)).faults).toEqual([null, null]);
  });

  it('may have a timeout of its own', async () => {
    const bus = new SimulatedBus(exchangeMs);
    bus.dead.add(1);
    const session = sessionOn(bus, { units: [{ unit: 1, timeoutMs: 700 }] });
    await session.read(session.planRead([addressOf(1)]));
    expect(bus.nowMs).toBe(700);
  });
});
