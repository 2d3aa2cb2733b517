import { describe, expect, it } from 'vitest';
import { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
import {
  adapterSummaries,
  checkAddress,
  checkConnection,
  findAdapter,
  installedAdapters,
  registerAdapters,
} from './registry.js';

const withManifest = (more: object) => ({
  ...inMemoryAdapter,
  manifest: { ...inMemoryAdapter.manifest, ...more },
});

describe('registering', () => {
  it('names the adapter that is there twice', () => {
    expect(() => registerAdapters([inMemoryAdapter, inMemoryAdapter])).toThrow(/"in-memory"/);
  });

  it('names the adapter that was written for another contract', () => {
    expect(() => registerAdapters([withManifest({ id: 'old', contract: '^0.9.0' })])).toThrow(
      /"old" was written for contract \^0\.9\.0/,
    );
  });
});

describe('installed adapters', () => {
  it('are found by id', () => {
    expect(findAdapter('modbus-tcp').manifest.title).toBe('Modbus TCP');
    expect([...installedAdapters.keys()]).toContain('in-memory');
  });

  it('that are not there are adapter.unknown, with those that are', () => {
    expect(() => findAdapter('telepathy')).toThrow(
      expect.objectContaining({
        code: 'adapter.unknown',
        message: expect.stringMatching(/"telepathy".*modbus-tcp/),
      }),
    );
  });

  it('have schemas that a form can be drawn from, without what has a default among the required', () => {
    const summary = adapterSummaries().find(({ id }) => id === 'modbus-tcp');
    expect(summary?.configurationSchema).toMatchObject({
      type: 'object',
      required: ['host'],
      properties: { port: { type: 'integer', minimum: 1, maximum: 65_535, default: 502 } },
      additionalProperties: false,
    });
    expect(summary?.addressSchema).toMatchObject({
      required: ['table', 'address', 'type'],
      properties: { type: { enum: ['bit', 'u16', 'i16', 'u32', 'i32', 'f32'] } },
    });
    expect(JSON.parse(JSON.stringify(summary))).toEqual(summary);
  });
});

describe('checks name the field', () => {
  it('of a connection', () => {
    expect(checkConnection({ adapter: 'modbus-tcp', configuration: { host: 'rig' } })).toEqual([]);
    const faults = checkConnection(
      { adapter: 'modbus-tcp', configuration: { host: ' ', port: 0, baud: 1 } },
      'connections[2]',
    );
    expect(faults.map(({ field }) => field)).toEqual([
      'connections[2].configuration.host',
      'connections[2].configuration.port',
      'connections[2].configuration',
    ]);
  });

  it('of an adapter that is not installed', () => {
    expect(checkConnection({ adapter: 'telepathy', configuration: {} }, 'connections[0]')).toMatchObject([
      { field: 'connections[0].adapter' },
    ]);
  });

  it('of an address', () => {
    expect(checkAddress('modbus-tcp', { table: 'coil', address: 1, type: 'bit' })).toEqual([]);
    expect(checkAddress('modbus-tcp', { table: 'coil', address: 1, type: 'u16' }, 'channels[1]')).toEqual([
      { field: 'channels[1].address.type', message: 'A coil holds one bit: use type "bit".' },
    ]);
    expect(checkAddress('modbus-tcp', 'x')).toMatchObject([{ field: 'address' }]);
  });
});
