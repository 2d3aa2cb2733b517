import { describe, expect, it } from 'vitest';
import { modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { modbusRtuAdapter } from './modbus-rtu.adapter.js';
import { modbusRtuConfigurationSchema } from './modbus-rtu-configuration.schema.js';
import { exchangeMs, silentIntervals } from './rtu-timing.js';

const even = (baudRate: number) => ({ baudRate, dataBits: 8, parity: 'even', stopBits: 1 }) as const;

describe('silent intervals', () => {
  // 3.5 characters of 11 bits, recomputed from MODBUS over Serial Line V1.02, 2.5.1.1.
  it.each([
    [1200, 32.083],
    [2400, 16.042],
    [4800, 8.021],
    [9600, 4.0104],
    [19_200, 2.0052],
  ])('at %d baud are %d ms', (baudRate, t35Ms) => {
    expect(silentIntervals(even(baudRate)).t35Ms).toBeCloseTo(t35Ms, 3);
  });

  it('are 0.8594 ms within a frame at 19200 baud, and fixed above', () => {
    expect(silentIntervals(even(19_200)).t15Ms).toBeCloseTo(0.8594, 4);
    expect(silentIntervals(even(38_400))).toEqual({ t15Ms: 0.75, t35Ms: 1.75 });
    expect(silentIntervals(even(115_200))).toEqual({ t15Ms: 0.75, t35Ms: 1.75 });
  });
});

describe('the scan budget', () => {
  it('of three registers at 19200 8E1 is 14.896 ms: 8 and 11 characters and two silent intervals', () => {
    const request = { kind: 'read', unit: 1, table: 'holding-register', address: 0, count: 3 } as const;
    expect(exchangeMs(request, even(19_200))).toBeCloseTo(14.896, 3);
  });

  it('counts every request of a scan, traces and turnaround included', () => {
    const configuration = modbusRtuConfigurationSchema.parse({ path: '/dev/ttyS0', turnaroundMs: 5 });
    const at = (address: number, more: object = {}) =>
      modbusAddressSchema.parse({ table: 'holding-register', address, type: 'u16', ...more });
    const three = [0, 1, 2].map((address) => at(address));
    expect(modbusRtuAdapter.estimate?.(configuration, three)).toEqual({
      requests: 1,
      wireS: expect.closeTo(0.019896, 6),
    });
    // 512 registers: four requests of 125 and one of 12; 8 + 255 and 8 + 29 characters of 11 bits.
    const trace = modbusRtuAdapter.estimate?.(configuration, [at(0, { points: 512 })]);
    const characterMs = 11 / 19.2;
    const wireMs = 4 * (263 * characterMs) + 37 * characterMs + 5 * (7 * characterMs + 5);
    expect(trace).toEqual({ requests: 5, wireS: expect.closeTo(wireMs / 1000, 9) });
  });

  it('names the address that is wrong', () => {
    const configuration = modbusRtuConfigurationSchema.parse({ path: '/dev/ttyS0' });
    const broadcast = { unit: 0, table: 'coil', address: 0, type: 'bit' } as never;
    expect(() => modbusRtuAdapter.estimate?.(configuration, [broadcast])).toThrow(
      expect.objectContaining({
        code: 'adapter.misconfigured',
        details: [
          { field: 'addresses[0].unit', message: expect.stringMatching(/^Unit 0 is the broadcast address/) },
        ],
      }),
    );
  });
});
