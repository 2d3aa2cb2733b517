import { afterEach, describe, expect, it } from 'vitest';
import type { AdapterSession } from '../contract.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { framed, type ScriptedServer, startScriptedServer } from '../modbus/testing/scripted-server.js';
import { modbusTcpAdapter } from './modbus-tcp.adapter.js';
import { modbusTcpConfigurationSchema } from './modbus-tcp-configuration.schema.js';

const hex = (text: string): Buffer => Buffer.from(text.replaceAll(' ', ''), 'hex');
const text = (bytes: Buffer): string => bytes.toString('hex').toUpperCase();
const at = (table: string, address: number, type: string): ModbusAddress =>
  modbusAddressSchema.parse({ unit: 0x11, table, address, type });
const run = (table: string, from: number, count: number, type: string): ModbusAddress[] =>
  Array.from({ length: count }, (_, index) => at(table, from + index, type));

let server: ScriptedServer;
let session: AdapterSession<ModbusAddress>;

async function startAnswering(answer: string): Promise<void> {
  server = await startScriptedServer((_, socket, transaction) => {
    socket.write(framed(transaction, hex(answer)));
  });
  session = await openAt(server.port);
}

function openAt(port: number, more: object = {}): Promise<AdapterSession<ModbusAddress>> {
  const configuration = modbusTcpConfigurationSchema.parse({ host: '127.0.0.1', port, ...more });
  return modbusTcpAdapter.open(configuration, new AbortController().signal);
}

afterEach(async () => {
  await session.close();
  await server.stop();
});

// Unit number and PDU of the worked examples of MODBUS Application Protocol V1.1b3, chapter 6, as they
// stand in public protocol test suites (unit 11 hex); checked there on the wire with their CRC.
describe('the frames of the examples of the application protocol', () => {
  it.each([
    ['coil', 0x13, 0x25, 'bit', '11 01 00 13 00 25', '11 01 05 CD 6B B2 0E 1B', [1, 0, 1, 1, 0, 0, 1, 1]],
    ['discrete-input', 0xc4, 0x16, 'bit', '11 02 00 C4 00 16', '11 02 03 AC DB 35', [0, 0, 1, 1, 0, 1, 0, 1]],
    ['holding-register', 0x6b, 3, 'u16', '11 03 00 6B 00 03', '11 03 06 02 2B 00 00 00 64', [555, 0, 100]],
    ['input-register', 8, 1, 'u16', '11 04 00 08 00 01', '11 04 02 00 0A', [10]],
  ] as const)('reads a %s', async (table, from, count, type, request, answer, values) => {
    await startAnswering(answer);
    const outcome = await session.read(session.planRead(run(table, from, count, type)));
    expect(server.requests.map(text)).toEqual([text(hex(request))]);
    expect(outcome.faults.every((fault) => fault === null)).toBe(true);
    expect([...outcome.values].slice(0, values.length)).toEqual(values);
  });

  it.each([
    ['a coil (FC05)', [at('coil', 0xac, 'bit')], [1], '11 05 00 AC FF 00', '11 05 00 AC FF 00'],
    ['a register (FC06)', [at('holding-register', 1, 'u16')], [3], '11 06 00 01 00 03', '11 06 00 01 00 03'],
    [
      'ten coils (FC15)',
      run('coil', 0x13, 10, 'bit'),
      [1, 0, 1, 1, 0, 0, 1, 1, 1, 0],
      '11 0F 00 13 00 0A 02 CD 01',
      '11 0F 00 13 00 0A',
    ],
    // 6.16: AND mask F2, OR mask 25 on register 5. A field of bits 0 to 3 and one of bit 5 give the masks below.
    [
      'bit fields (FC22)',
      [
        { ...at('holding-register', 4, 'u16'), bits: { from: 0, count: 4 } },
        { ...at('holding-register', 4, 'u16'), bits: { from: 5, count: 1 } },
      ],
      [5, 1],
      '11 16 00 04 FF D0 00 25',
      '11 16 00 04 FF D0 00 25',
    ],
    [
      'two registers (FC16)',
      run('holding-register', 1, 2, 'u16'),
      [10, 258],
      '11 10 00 01 00 02 04 00 0A 01 02',
      '11 10 00 01 00 02',
    ],
  ])('writes %s', async (_, addresses, values, request, answer) => {
    await startAnswering(answer);
    const outcome = await session.write(addresses, values);
    expect(server.requests.map(text)).toEqual([text(hex(request))]);
    expect(outcome).toEqual({ faults: addresses.map(() => null), lost: null });
  });

  it('understands an exception answer and says where and why', async () => {
    await startAnswering('11 83 02');
    const outcome = await session.read(session.planRead([at('holding-register', 0x19a, 'u16')]));
    expect(outcome.faults[0]).toMatchObject({
      code: 'adapter.refused',
      message: 'unit 17, holding-register 410: the device answered exception 02 (illegal data address).',
    });
  });

  it('understands the messages of a public protocol suite', async () => {
    await startAnswering('11 03 04 00 8D 00 8E');
    const outcome = await session.read(session.planRead(run('holding-register', 0x7c, 2, 'u16')));
    expect(server.requests.map(text)).toEqual(['1103007C0002']);
    expect([...outcome.values]).toEqual([0x8d, 0x8e]);
  });

  it('takes an exception of another unit as corrupt', async () => {
    await startAnswering('12 83 02');
    const outcome = await session.read(session.planRead([at('holding-register', 0x19a, 'u16')]));
    expect(outcome.faults[0]?.code).toBe('adapter.corrupt');
  });

  it.each([
    ['another protocol', '00 01', '00 05', /no Modbus TCP/],
    ['a length that no message has', '00 00', 'FF FF', /no Modbus TCP/],
  ])('gives a connection up whose headers are those of %s', async (_, protocol, length, message) => {
    server = await startScriptedServer((__, socket, transaction) => {
      const header = Buffer.concat([
        Buffer.from([transaction >> 8, transaction & 255]),
        hex(protocol),
        hex(length),
      ]);
      socket.write(Buffer.concat([header, hex('11 03 02 00 01')]));
    });
    session = await openAt(server.port);
    const outcome = await session.read(session.planRead([at('holding-register', 1, 'u16')]));
    expect(outcome.lost).toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringMatching(message),
    });
    expect(outcome.values[0]).toBeNaN();
  });

  it('takes a write that the device did not echo as corrupt', async () => {
    await startAnswering('11 06 00 01 00 04');
    const outcome = await session.write([at('holding-register', 1, 'u16')], [3]);
    expect(outcome.faults[0]?.code).toBe('adapter.corrupt');
  });

  it('takes an answer with another number of registers as corrupt', async () => {
    await startAnswering('11 03 04 00 01 00 02');
    const outcome = await session.read(session.planRead([at('holding-register', 1, 'u16')]));
    expect(outcome.faults[0]?.code).toBe('adapter.corrupt');
  });

  it('takes an answer of another unit as corrupt', async () => {
    await startAnswering('12 03 02 00 01');
    const outcome = await session.read(session.planRead([at('holding-register', 1, 'u16')]));
    expect(outcome.faults[0]?.code).toBe('adapter.corrupt');
  });

  describe('with read-back (FC23)', () => {
    const two = run('holding-register', 3, 2, 'u16');

    async function writeTwo(answer: string) {
      await startAnswering(answer);
      await session.close();
      session = await openAt(server.port, { readBack: true });
      return session.write(two, [255, 256]);
    }

    it('writes and reads the same registers in one request', async () => {
      const outcome = await writeTwo('11 17 04 00 FF 01 00');
      expect(server.requests.map(text)).toEqual([text(hex('11 17 00 03 00 02 00 03 00 02 04 00 FF 01 00'))]);
      expect(outcome).toEqual({ faults: [null, null], lost: null });
    });

    it('reports what the device holds where that is something else', async () => {
      const { faults } = await writeTwo('11 17 04 00 FF 00 FA');
      expect(faults[0]).toBeNull();
      expect(faults[1]).toMatchObject({
        code: 'adapter.refused',
        message: 'unit 17, holding-register 4: the device holds 0x00FA instead of 0x0100.',
      });
    });

    it('says what to do where the device lacks the function', async () => {
      const { faults } = await writeTwo('11 97 01');
      expect(faults[0]?.message).toContain('turn "Read back" of the connection off');
    });
  });

  it('delivers a float that is not a number as NaN without a fault: the readings mark it bad', async () => {
    await startAnswering('11 03 04 7F C0 00 00');
    const outcome = await session.read(session.planRead([at('holding-register', 1, 'f32')]));
    expect([outcome.values[0], outcome.faults[0]]).toEqual([NaN, null]);
  });
});
