import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { AdapterSession } from '../contract.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { modbusRtuAdapter } from './modbus-rtu.adapter.js';
import { modbusRtuConfigurationSchema } from './modbus-rtu-configuration.schema.js';
import { type ScriptedLine, startScriptedLine } from './testing/scripted-line.js';

const hex = (text: string): Buffer => Buffer.from(text.replaceAll(' ', ''), 'hex');
const text = (bytes: Buffer): string => bytes.toString('hex').toUpperCase();
const at = (table: string, address: number, type = 'u16', more: object = {}): ModbusAddress =>
  modbusAddressSchema.parse({ unit: 0x11, table, address, type, ...more });
const run = (table: string, from: number, count: number, type = 'u16'): ModbusAddress[] =>
  Array.from({ length: count }, (_, index) => at(table, from + index, type));

let line: ScriptedLine;
let session: AdapterSession<ModbusAddress>;

async function open(more: object = {}): Promise<void> {
  const configuration = modbusRtuConfigurationSchema.parse({
    path: line.path,
    baudRate: 115_200,
    timeoutMs: 4000,
    unitTimeoutMs: 1500,
    ...more,
  });
  session = await modbusRtuAdapter.open(configuration, new AbortController().signal);
}

beforeEach(async () => {
  line = await startScriptedLine();
});

afterEach(async () => {
  await session.close();
  await line.stop();
});

const answering = (answer: string) => (_: Buffer, send: (bytes: Uint8Array) => void) => {
  send(hex(answer));
};

async function readOne(addresses: readonly ModbusAddress[]) {
  const { values, faults } = await session.read(session.planRead(addresses));
  return { values: [...values], codes: faults.map((fault) => fault?.code ?? null), faults };
}

// Whole frames with checksum of the worked examples of MODBUS Application Protocol V1.1b3, chapter 6, for unit
// 11 hex, as they stand in public protocol test suites and tutorials.
describe('the frames of the examples, on a pseudo-terminal', () => {
  it.each([
    [
      'coil',
      0x13,
      0x25,
      'bit',
      '11 01 00 13 00 25 0E 84',
      '11 01 05 CD 6B B2 0E 1B 45 E6',
      [1, 0, 1, 1, 0, 0, 1, 1],
    ],
    [
      'discrete-input',
      0xc4,
      0x16,
      'bit',
      '11 02 00 C4 00 16 BA A9',
      '11 02 03 AC DB 35 20 18',
      [0, 0, 1, 1, 0, 1, 0, 1],
    ],
    [
      'holding-register',
      0x6b,
      3,
      'u16',
      '11 03 00 6B 00 03 76 87',
      '11 03 06 AE 41 56 52 43 40 49 AD',
      [0xae41, 0x5652, 0x4340],
    ],
    [
      'holding-register',
      0x6b,
      3,
      'u16',
      '11 03 00 6B 00 03 76 87',
      '11 03 06 02 2B 00 00 00 64 C8 BA',
      [555, 0, 100],
    ],
    [
      'holding-register',
      0x7c,
      2,
      'u16',
      '11 03 00 7C 00 02 07 43',
      '11 03 04 00 8D 00 8E FB BD',
      [0x8d, 0x8e],
    ],
    ['input-register', 8, 1, 'u16', '11 04 00 08 00 01 B2 98', '11 04 02 00 0A F8 F4', [10]],
  ] as const)('reads a %s', async (table, from, count, type, request, answer, values) => {
    line.respond = answering(answer);
    await open();
    const outcome = await readOne(run(table, from, count, type));
    expect(line.requests.map(text)).toEqual([text(hex(request))]);
    expect(outcome.codes.every((code) => code === null)).toBe(true);
    expect(outcome.values.slice(0, values.length)).toEqual(values);
  });

  const bits = run('coil', 0x13, 10, 'bit');
  it.each([
    ['a coil (FC05)', [at('coil', 0xac, 'bit')], [1], '11 05 00 AC FF 00 4E 8B', '11 05 00 AC FF 00 4E 8B'],
    [
      'a register (FC06)',
      [at('holding-register', 1)],
      [3],
      '11 06 00 01 00 03 9A 9B',
      '11 06 00 01 00 03 9A 9B',
    ],
    [
      'ten coils (FC15)',
      bits,
      [1, 0, 1, 1, 0, 0, 1, 1, 1, 0],
      '11 0F 00 13 00 0A 02 CD 01 BF 0B',
      '11 0F 00 13 00 0A 26 99',
    ],
    [
      'two registers (FC16)',
      run('holding-register', 1, 2),
      [10, 258],
      '11 10 00 01 00 02 04 00 0A 01 02 C6 F0',
      '11 10 00 01 00 02 12 98',
    ],
  ])('writes %s', async (_, addresses, values, request, answer) => {
    line.respond = answering(answer);
    await open();
    const outcome = await session.write(addresses, values);
    expect(line.requests.map(text)).toEqual([text(hex(request))]);
    expect(outcome).toEqual({ faults: addresses.map(() => null), lost: null });
  });

  it('asks and answers with the last two bytes low byte first (01 03 … C5 CD, C4 0B)', async () => {
    await open({ unitTimeoutMs: 5 });
    for (const count of [10, 2]) {
      await readOne(run('holding-register', 0, count).map((address) => ({ ...address, unit: 1 })));
    }
    await expect
      .poll(() => line.requests.map(text), { timeout: 4000, interval: 2 })
      .toEqual(['01030000000AC5CD', '010300000002C40B']);
  });

  it('understands an exception and says where and why', async () => {
    line.respond = answering('11 83 02 C1 34');
    await open();
    const { faults } = await readOne([at('holding-register', 0x19a)]);
    expect(line.requests.map(text)).toEqual(['1103019A0001A749']);
    expect(faults[0]?.message).toBe(
      'unit 17, holding-register 410: the device answered exception 02 (illegal data address).',
    );
  });
});

describe('what is no answer', () => {
  const good = hex('11 03 06 02 2B 00 00 00 64 C8 BA');
  const three = run('holding-register', 0x6b, 3);

  it.each([
    ['a wrong checksum', '11 03 06 02 2B 00 00 00 64 C8 BB', /without a valid checksum/],
    ['a changed byte', '11 03 06 02 2A 00 00 00 64 C8 BA', /without a valid checksum/],
    ['an answer that broke off', '11 03 06 02 2B 00 00', /broke off after 7 of 11 bytes/],
    ['a wrong checksum of an exception', '11 83 02 C1 35', /without a valid checksum/],
  ])('%s gives no value: adapter.corrupt', async (_, answer, message) => {
    line.respond = answering(answer);
    await open();
    const { values, codes, faults } = await readOne(three);
    expect([values, codes]).toEqual([[NaN, NaN, NaN], Array(3).fill('adapter.corrupt')]);
    expect(faults[0]?.message).toMatch(message);
  });

  it('the answer of another unit is passed over: alone it is silence, before the right one it harms nothing', async () => {
    // The answer of the example under another unit number, its checksum recomputed.
    const other = hex('12 03 06 02 2B 00 00 00 64 DC 4A');
    line.respond = (_, send) => {
      send(other);
    };
    await open({ unitTimeoutMs: 600 });
    expect((await readOne(three)).codes).toEqual(Array(3).fill('adapter.timeout'));
    line.respond = (_, send) => {
      send(Buffer.concat([other, good]));
    };
    expect((await readOne(three)).values).toEqual([555, 0, 100]);
  });

  it('a write that the device did not confirm as asked is adapter.corrupt', async () => {
    line.respond = answering('11 06 00 01 00 04 DB 59');
    await open();
    const outcome = await session.write([at('holding-register', 1)], [3]);
    expect(outcome.faults[0]).toMatchObject({ code: 'adapter.corrupt' });
    expect(outcome.faults[0]?.message).toContain('confirmed something else');
  });

  it('stray bytes before and after an answer are noise', async () => {
    line.respond = (_, send) => {
      send(Buffer.concat([hex('00 FF 11'), good, hex('00')]));
    };
    await open();
    expect((await readOne(three)).values).toEqual([555, 0, 100]);
    expect((await readOne(three)).values).toEqual([555, 0, 100]);
  });

  it('a late answer is never taken for that of the next request', async () => {
    const late: (() => void)[] = [];
    line.respond = (_, send) => {
      late.push(() => {
        send(hex('11 03 06 AE 41 56 52 43 40 49 AD'));
      });
    };
    await open({ unitTimeoutMs: 600 });
    expect((await readOne(three)).codes).toEqual(Array(3).fill('adapter.timeout'));
    for (const release of late) release();
    // It comes in while nothing is asked; two programs pass it on, which takes a moment.
    await new Promise((resolve) => setTimeout(resolve, 300));
    line.respond = (_, send) => {
      send(good);
    };
    expect((await readOne(three)).values).toEqual([555, 0, 100]);
  });

  it('a late answer to a request of another kind is passed over while the right one is waited for', async () => {
    line.respond = (_, send) => {
      send(hex('11 04 02 00 0A F8 F4'));
      setTimeout(() => {
        send(good);
      }, 60);
    };
    await open();
    expect((await readOne(three)).values).toEqual([555, 0, 100]);
  });
});

describe('a line with an echo', () => {
  const good = hex('11 03 06 02 2B 00 00 00 64 C8 BA');
  const three = run('holding-register', 0x6b, 3);

  it('is understood where the configuration says so', async () => {
    line.respond = (frame, send) => {
      send(Buffer.concat([frame, good]));
    };
    await open({ hasEcho: true });
    expect((await readOne(three)).values).toEqual([555, 0, 100]);
  });

  it('never takes its own request for the confirmation of a write', async () => {
    line.respond = (frame, send) => {
      send(frame);
    };
    await open({ hasEcho: true, unitTimeoutMs: 600 });
    const outcome = await session.write([at('holding-register', 1)], [3]);
    expect(outcome.faults[0]?.code).toBe('adapter.timeout');
  });

  it('is named where the configuration forgot it, or where another sender was in the way', async () => {
    line.respond = (frame, send) => {
      send(Buffer.concat([frame, good]));
    };
    await open();
    expect((await readOne(three)).faults[0]?.message).toContain('set "Echo"');
    await session.close();
    line.respond = (frame, send) => {
      send(Buffer.concat([frame.subarray(0, 4), hex('AA AA'), good]));
    };
    await open({ hasEcho: true });
    expect((await readOne(three)).faults[0]?.message).toContain('another sender was in the way');
  });
});

it('asks a busy device again within the call (exceptions 05 and 06)', async () => {
  const answers = ['11 83 06 C0 F7', '11 83 05 80 F6', '11 03 06 02 2B 00 00 00 64 C8 BA'];
  line.respond = (_, send) => {
    send(hex(answers[line.requests.length - 1] ?? ''));
  };
  await open();
  expect((await readOne(run('holding-register', 0x6b, 3))).values).toEqual([555, 0, 100]);
  expect(line.requests).toHaveLength(3);
});

it('keeps the silent interval before each request', async () => {
  const startsMs: number[] = [];
  line.respond = (_, send) => {
    startsMs.push(performance.now());
    send(hex('11 03 06 02 2B 00 00 00 64 C8 BA'));
  };
  await open({ baudRate: 1200 });
  for (let turn = 0; turn < 4; turn += 1) await readOne(run('holding-register', 0x6b, 3));
  // 3.5 characters of 11 bits at 1200 baud are 32.08 ms (MODBUS over Serial Line V1.02, 2.5.1.1).
  const gapsMs = startsMs.slice(1).map((startMs, index) => startMs - (startsMs[index] ?? NaN));
  for (const gapMs of gapsMs) expect(gapMs).toBeGreaterThan(32);
});

it('is lost when the adapter is pulled out', async () => {
  await open();
  const reading = session.read(session.planRead([at('holding-register', 0)]));
  await line.cut();
  const { lost } = await reading;
  expect(lost?.code).toBe('adapter.disconnected');
  expect(lost?.message).toContain(line.path);
});
