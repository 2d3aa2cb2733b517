import { fork } from 'node:child_process';
import { once } from 'node:events';
import { resolve } from 'node:path';
import { ModbusDevice } from './modbus-device.js';

jest.setTimeout(90_000);

describe('free run', () => {
  it('scans for real: each scan and each bare loop writes the device once', async () => {
    const device = await ModbusDevice.start();
    const program = resolve(__dirname, '../../dist/rig-host/free-run.js');
    const child = fork(program, { stdio: ['ignore', 'ignore', 'inherit', 'ipc'] });
    const exited = once(child, 'exit');
    const answer = once(child, 'message');
    child.send({ host: '127.0.0.1', port: device.port, scans: 30, rounds: 2 });
    const [outcome] = (await answer) as [Record<string, number>];
    expect(Object.keys(outcome).sort()).toEqual(['bareLoopsPerS', 'ratio', 'scansPerS']);
    for (const value of Object.values(outcome)) expect(value).toBeGreaterThan(0);
    expect(await exited).toEqual([0, null]);
    // Three rounds with the warm-up, of 30 bare loops and 30 scans, after 20 scans with the run begun.
    expect(device.writes.length).toBeGreaterThanOrEqual(3 * 60 + 20);
    expect(device.writes.length).toBeLessThanOrEqual(3 * 60 + 40);
    await device.cut();
  });
});
