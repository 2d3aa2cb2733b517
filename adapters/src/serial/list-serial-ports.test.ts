import { mkdirSync, mkdtempSync, realpathSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { SerialPortMock } from 'serialport';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { listSerialPorts } from './list-serial-ports.js';

let deviceFolder = '';

beforeEach(() => {
  deviceFolder = realpathSync(mkdtempSync(join(tmpdir(), 'cresthold-ports-')));
  for (const name of ['ttyS0', 'ttyUSB10', 'ttyUSB2', 'tty1', 'ptmx', 'null']) {
    writeFileSync(join(deviceFolder, name), '');
  }
  mkdirSync(join(deviceFolder, 'serial', 'by-id'), { recursive: true });
  symlinkSync('../../ttyUSB2', join(deviceFolder, 'serial', 'by-id', 'usb-converter-if00'));
  symlinkSync('../../ttyUSB7', join(deviceFolder, 'serial', 'by-id', 'usb-gone-if00'));
});

afterEach(() => {
  rmSync(deviceFolder, { recursive: true });
  SerialPortMock.binding.reset();
});

it('lists what the binding knows, with the path that stays', async () => {
  const path = join(deviceFolder, 'ttyUSB2');
  SerialPortMock.binding.createPort(path, { manufacturer: 'maker', vendorId: '0403', productId: '6001' });
  SerialPortMock.binding.createPort('/dev/mock-a');
  const ports = await listSerialPorts({ list: () => SerialPortMock.list(), deviceFolder });
  expect(ports[1]).toEqual({
    path,
    stablePath: join(deviceFolder, 'serial', 'by-id', 'usb-converter-if00'),
    manufacturer: 'maker',
    serialNumber: '1',
    vendorId: '0403',
    productId: '6001',
  });
  expect(ports[0]).toMatchObject({ path: '/dev/mock-a', stablePath: null, vendorId: null });
});

it('falls back to the device files where there is no device manager', async () => {
  const list = (): Promise<never> => Promise.reject(new Error('spawn udevadm ENOENT'));
  const ports = await listSerialPorts({ list, deviceFolder });
  expect(ports.map(({ path }) => path.slice(deviceFolder.length + 1))).toEqual([
    'ttyS0',
    'ttyUSB2',
    'ttyUSB10',
  ]);
});

it('is empty where there is nothing at all', async () => {
  const list = (): Promise<never> => Promise.reject(new Error('nothing'));
  expect(await listSerialPorts({ list, deviceFolder: join(deviceFolder, 'none') })).toEqual([]);
});

it('answers on this machine', async () => {
  for (const { path } of await listSerialPorts()) expect(path).not.toBe('');
});
