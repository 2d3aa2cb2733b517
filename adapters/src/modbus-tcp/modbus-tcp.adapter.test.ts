import type { Socket } from 'node:net';
import { afterEach, describe, expect, it } from 'vitest';
import type { AdapterSession, ReadOutcome } from '../contract.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { framed, startScriptedServer } from '../modbus/testing/scripted-server.js';
import { startJsmodbusServer } from '../modbus/testing/jsmodbus-server.js';
import { startRelay } from '../modbus/testing/relay.js';
import { modbusTcpAdapter } from './modbus-tcp.adapter.js';
import { modbusTcpConfigurationSchema } from './modbus-tcp-configuration.schema.js';

/** Waits end as soon as they can; a busy machine gets time. */
const patient = { timeout: 4000, interval: 1 };

const holding = (address: number, unit = 1): ModbusAddress =>
  modbusAddressSchema.parse({ unit, table: 'holding-register', address, type: 'u16' });

const cleanups: (() => Promise<void>)[] = [];

afterEach(async () => {
  for (const clean of cleanups.splice(0).reverse()) await clean();
});

async function openAt(port: number, more: object = {}): Promise<AdapterSession<ModbusAddress>> {
  const configuration = modbusTcpConfigurationSchema.parse({
    host: '127.0.0.1',
    port,
    timeoutMs: 3000,
    ...more,
  });
  const session = await modbusTcpAdapter.open(configuration, new AbortController().signal);
  cleanups.push(() => session.close());
  return session;
}

type Respond = (unitAndPdu: Buffer, socket: Socket, transaction: number) => void;

async function startDevice(respond: Respond) {
  const server = await startScriptedServer(respond);
  cleanups.push(() => server.stop());
  return server;
}

/** Answers a read of one register with the given word. */
const word = (transaction: number, value: number, unit = 1): Buffer =>
  framed(transaction, Uint8Array.of(unit, 3, 2, value >>> 8, value & 255));

const codesOf = ({ faults }: ReadOutcome): (string | undefined)[] => faults.map((fault) => fault?.code);

describe('a device that misbehaves', () => {
  it('never answers: timeouts first, then the connection counts as lost', async () => {
    const device = await startDevice(() => undefined);
    const session = await openAt(device.port, { silencesUntilLost: 3, timeoutMs: 50 });
    const plan = session.planRead([holding(0)]);
    const outcomes: (string | undefined)[] = [];
    for (let scan = 0; scan < 4; scan += 1) {
      const outcome = await session.read(plan);
      outcomes.push(outcome.lost ? `lost: ${outcome.lost.code}` : codesOf(outcome)[0]);
    }
    expect(outcomes).toEqual([
      'adapter.timeout',
      'adapter.timeout',
      'lost: adapter.disconnected',
      'lost: adapter.disconnected',
    ]);
    expect(device.requests).toHaveLength(3);
    await expect.poll(() => device.connections, patient).toBe(0);
  });

  it('an answer in between starts the count of silences anew', async () => {
    let requests = 0;
    const device = await startDevice((_, socket, transaction) => {
      requests += 1;
      if (requests === 2) socket.write(word(transaction, 7));
    });
    const session = await openAt(device.port, { silencesUntilLost: 2, timeoutMs: 400 });
    const plan = session.planRead([holding(0)]);
    const lost: boolean[] = [];
    for (let scan = 0; scan < 4; scan += 1) lost.push((await session.read(plan)).lost !== null);
    expect(lost).toEqual([false, false, false, true]);
  });

  it('answers late: a late answer is never taken for that of the next request', async () => {
    const open: (() => void)[] = [];
    let requests = 0;
    const device = await startDevice((_, socket, transaction) => {
      requests += 1;
      const value = requests;
      if (requests === 1) open.push(() => socket.write(word(transaction, value)));
      else {
        for (const late of open.splice(0)) late();
        socket.write(word(transaction, value));
      }
    });
    const session = await openAt(device.port, { timeoutMs: 400 });
    const plan = session.planRead([holding(0)]);
    expect(codesOf(await session.read(plan))).toEqual(['adapter.timeout']);
    expect((await session.read(plan)).values[0]).toBe(2);
    expect((await session.read(plan)).values[0]).toBe(3);
  });

  it('answers twice: the second answer, at once or before the next one, is dropped', async () => {
    let requests = 0;
    let before: Buffer = Buffer.alloc(0);
    const device = await startDevice((_, socket, transaction) => {
      requests += 1;
      const answer = word(transaction, requests);
      socket.write(Buffer.concat([before, answer, answer]));
      before = answer;
    });
    const session = await openAt(device.port);
    const plan = session.planRead([holding(0)]);
    for (let scan = 1; scan <= 300; scan += 1) expect((await session.read(plan)).values[0]).toBe(scan);
  });

  it.each([1, 5, 8, 10])('closes after %d bytes of an answer: lost at once', async (bytes) => {
    const device = await startDevice((_, socket, transaction) => {
      socket.end(word(transaction, 1).subarray(0, bytes));
    });
    const session = await openAt(device.port, { timeoutMs: 10_000 });
    const outcome = await session.read(session.planRead([holding(0)]));
    expect(outcome.lost).toMatchObject({ code: 'adapter.disconnected' });
    expect(outcome.lost?.message).toContain(`127.0.0.1:${device.port}`);
  });

  it('resets the connection: lost at once', async () => {
    const device = await startDevice((_, socket) => {
      socket.resetAndDestroy();
    });
    const session = await openAt(device.port, { timeoutMs: 10_000 });
    const outcome = await session.read(session.planRead([holding(0)]));
    expect(outcome.lost).toMatchObject({ code: 'adapter.disconnected' });
    expect(outcome.lost?.message).toContain('ECONNRESET');
  });

  it('sends its answers byte by byte: they are read all the same', async () => {
    const server = await startJsmodbusServer();
    const relay = await startRelay(server.port);
    cleanups.push(
      () => server.stop(),
      () => relay.stop(),
    );
    for (let address = 0; address < 20; address += 1) server.map.holding.set(address, address * 1000);
    relay.setMode({ kind: 'dribble' });
    const session = await openAt(relay.port, { timeoutMs: 5000 });
    const addresses = Array.from({ length: 20 }, (_, address) => holding(address));
    const { values } = await session.read(session.planRead(addresses));
    expect([...values]).toEqual(addresses.map(({ address }) => address * 1000));
  });

  it('has one silent unit: the other units are read from the second read on', async () => {
    const device = await startDevice((request, socket, transaction) => {
      if (request[0] === 2) socket.write(word(transaction, 42, 2));
    });
    const session = await openAt(device.port, { silencesUntilLost: 5, timeoutMs: 400 });
    const plan = session.planRead([holding(0, 1), holding(0, 2)]);
    await session.read(plan);
    for (let scan = 0; scan < 3; scan += 1) {
      const outcome = await session.read(plan);
      expect([outcome.lost, ...codesOf(outcome)]).toEqual([null, 'adapter.timeout', undefined]);
      expect(outcome.values[1]).toBe(42);
    }
  });

  it('has one silent unit: writes to the other units go out in the same call', async () => {
    const device = await startDevice((request, socket, transaction) => {
      if (request[0] === 2) socket.write(framed(transaction, request));
    });
    const session = await openAt(device.port, { timeoutMs: 1000 });
    const outcome = await session.write([holding(0, 1), holding(0, 2)], [1, 2]);
    expect(outcome.faults.map((fault) => fault?.code)).toEqual(['adapter.timeout', undefined]);
  });
});

describe('requests', () => {
  it('are learnt: a block that was refused is asked in parts from then on', async () => {
    const server = await startJsmodbusServer();
    const relay = await startRelay(server.port);
    cleanups.push(
      () => server.stop(),
      () => relay.stop(),
    );
    for (const address of [0, 1, 2, 3, 5, 6, 7]) server.map.holding.set(address, address);
    const session = await openAt(relay.port);
    const plan = session.planRead(Array.from({ length: 8 }, (_, address) => holding(address)));
    expect(plan.requests).toBe(1);
    const outcome = await session.read(plan);
    expect(codesOf(outcome).map((code) => code ?? null)).toEqual(
      [0, 1, 2, 3, 4, 5, 6, 7].map((address) => (address === 4 ? 'adapter.refused' : null)),
    );
    const before = relay.requests.length;
    await session.read(plan);
    expect(relay.requests.length - before).toBe(plan.requests);
    expect(plan.requests).toBe(4);
  });

  it('are one at a time on the wire', async () => {
    let open = 0;
    let mostOpen = 0;
    const device = await startDevice((_, socket, transaction) => {
      open += 1;
      mostOpen = Math.max(mostOpen, open);
      setTimeout(() => {
        open -= 1;
        socket.write(word(transaction, 1));
      }, 2);
    });
    const session = await openAt(device.port);
    const plans = Array.from({ length: 5 }, (_, address) => session.planRead([holding(address * 10)]));
    await Promise.all(plans.map((plan) => session.read(plan)));
    expect([device.requests.length, mostOpen]).toEqual([5, 1]);
  });
});

it('opens and closes a hundred times without leaking a socket', async () => {
  const device = await startDevice((_, socket, transaction) => socket.write(word(transaction, 5)));
  const socketsBefore = process.getActiveResourcesInfo().filter((name) => name === 'TCPSocketWrap').length;
  for (let round = 0; round < 100; round += 1) {
    const session = await openAt(device.port);
    expect((await session.read(session.planRead([holding(0)]))).values[0]).toBe(5);
    await session.close();
  }
  await expect.poll(() => device.connections, patient).toBe(0);
  const sockets = process.getActiveResourcesInfo().filter((name) => name === 'TCPSocketWrap').length;
  expect(sockets).toBeLessThanOrEqual(socketsBefore);
});
