import { once } from 'node:events';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { SerialPort } from 'serialport';
import { afterAll, expect, it } from 'vitest';
import { bowlOverModbus, bowlRegisters } from './bowl-bench.fixture.js';
import { makeFaultedModel } from './make-faulted-model.js';
import { serveModbusRtu } from './modbus-rtu-face.js';
import { ModbusStation } from './modbus-station.js';
import { rtuFrame } from './rtu-framing.js';
import { openSerialLine } from './serial-line.js';

const folder = mkdtempSync(join(tmpdir(), 'bench-line-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const lineAt = (pty: string) => ({ serial: null, pty, baud: 19_200, parity: 'even', stopBits: 1 }) as const;

async function openPort(path: string): Promise<SerialPort> {
  const port = new SerialPort({ path, baudRate: 19_200, parity: 'even', autoOpen: false });
  await new Promise<void>((opened, failed) => port.open((error) => (error ? failed(error) : opened())));
  return port;
}

async function ask(port: SerialPort, frame: Buffer, answerBytes: number): Promise<Buffer> {
  port.write(frame);
  let answer = Buffer.alloc(0);
  while (answer.length < answerBytes) {
    const [bytes] = (await once(port, 'data')) as [Buffer];
    answer = Buffer.concat([answer, bytes]);
  }
  return answer;
}

it(
  'serves a pseudo-terminal to one peer after another, silent for other units and bad frames',
  { timeout: 20_000 },
  async () => {
    const path = join(folder, 'bowl');
    const line = await openSerialLine(lineAt(path));
    const model = makeFaultedModel(bowlOverModbus, { seed: 1, isNoisy: false, isDrifting: false }, {});
    const writes: number[] = [];
    const station = new ModbusStation(bowlRegisters, null, model, () => {}, {
      onWrite: (_unit, { engineering }) => writes.push(engineering),
      onRefused: () => {},
    });
    const face = serveModbusRtu(station, line, 20);
    const write = (value: number) => Buffer.from([6, 0, 0, 0, value]);

    const first = await openPort(path);
    expect(await ask(first, rtuFrame(17, write(10)), 8)).toEqual(rtuFrame(17, write(10)));
    // To another unit, with a spoiled check sum, to all: no answer comes before that to the last one.
    first.write(rtuFrame(18, write(11)));
    const spoiled = rtuFrame(17, write(12));
    spoiled[7] = (spoiled[7] ?? 0) + 1;
    first.write(spoiled);
    await new Promise((later) => setTimeout(later, 100));
    first.write(rtuFrame(0, write(13)));
    expect(await ask(first, rtuFrame(17, write(14)), 8)).toEqual(rtuFrame(17, write(14)));
    await new Promise<void>((closed) => first.close(() => closed()));

    const second = await openPort(path);
    expect(await ask(second, rtuFrame(17, write(15)), 8)).toEqual(rtuFrame(17, write(15)));
    await new Promise<void>((closed) => second.close(() => closed()));
    expect(writes.map((value) => Math.round(value * 10))).toEqual([10, 13, 14, 15]);

    face.stop();
    await line.close();
    expect(existsSync(path)).toBe(false);
  },
);

it('says what to do where no pseudo-terminal can be made', async () => {
  await expect(openSerialLine(lineAt(join(folder, 'missing', 'bowl')))).rejects.toThrow(
    'No pseudo-terminal at',
  );
});
