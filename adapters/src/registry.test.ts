import { describe, expect, it } from 'vitest';
import type { Adapter } from './contract.js';
import { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
import { AdapterRegistry, shippedRegistry } from './registry.js';

const withManifest = (more: object): Adapter => ({
  ...inMemoryAdapter,
  manifest: { ...inMemoryAdapter.manifest, ...more },
});

const loaded = (adapter: Adapter, reference = './plug-in') => ({
  reference,
  version: '0.3.1',
  id: adapter.manifest.id,
  title: adapter.manifest.title,
  contract: adapter.manifest.contract,
  adapter,
  error: null,
});

describe('a registry', () => {
  it('of shipped adapters names the one that is there twice', () => {
    expect(() => new AdapterRegistry([inMemoryAdapter, inMemoryAdapter])).toThrow(/"in-memory"/);
  });

  it('of shipped adapters names the one that was written for another contract', () => {
    expect(() => new AdapterRegistry([withManifest({ id: 'old', contract: '^0.9.0' })])).toThrow(
      /"old" was written for contract \^0\.9\.0/,
    );
  });

  it('takes plug-ins beside them', () => {
    const mine = withManifest({ id: 'mine', title: 'Mine' });
    const registry = new AdapterRegistry([inMemoryAdapter], [loaded(mine)]);
    expect(registry.find('mine')).toBe(mine);
    expect(registry.listings.map(({ id, state, origin, version }) => [id, state, origin, version])).toEqual([
      ['in-memory', 'ready', 'shipped', expect.stringMatching(/^\d+\.\d+\.\d+$/)],
      ['mine', 'ready', 'plug-in', '0.3.1'],
    ]);
  });

  it('keeps the first of two adapters with one id, and lists the second as broken', () => {
    const registry = new AdapterRegistry([inMemoryAdapter], [loaded(withManifest({ title: 'Usurper' }))]);
    expect(registry.find('in-memory')).toBe(inMemoryAdapter);
    expect(registry.listings[1]).toMatchObject({
      title: 'Usurper',
      state: 'broken',
      error: { code: 'plug-in.duplicate' },
      configurationSchema: null,
    });
  });
});

describe('shipped adapters', () => {
  it('are found by id', () => {
    expect(shippedRegistry.find('modbus-tcp').manifest.title).toBe('Modbus TCP');
    expect([...shippedRegistry.adapters.keys()]).toContain('in-memory');
  });

  it('that are not there are adapter.unknown, with those that are', () => {
    expect(() => shippedRegistry.find('telepathy')).toThrow(
      expect.objectContaining({
        code: 'adapter.unknown',
        message: expect.stringMatching(/"telepathy".*modbus-tcp/),
      }),
    );
  });

  it('have schemas that a form can be drawn from, without what has a default among the required', () => {
    const listing = shippedRegistry.listings.find(({ id }) => id === 'modbus-tcp');
    expect(listing?.configurationSchema).toMatchObject({
      type: 'object',
      required: ['host'],
      properties: { port: { type: 'integer', minimum: 1, maximum: 65_535, default: 502 } },
      additionalProperties: false,
    });
    expect(listing?.addressSchema).toMatchObject({ required: expect.arrayContaining(['table', 'address']) });
    expect(JSON.parse(JSON.stringify(listing))).toEqual(listing);
  });
});

describe('checks name the field', () => {
  it('of a connection', () => {
    expect(
      shippedRegistry.checkConnection({ adapter: 'modbus-tcp', configuration: { host: 'rig' } }),
    ).toEqual([]);
    const faults = shippedRegistry.checkConnection(
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
    const faults = shippedRegistry.checkConnection(
      { adapter: 'telepathy', configuration: {} },
      'connections[0]',
    );
    expect(faults).toMatchObject([{ field: 'connections[0].adapter' }]);
  });

  it('of an address', () => {
    const coil = { table: 'coil', address: 1 };
    expect(shippedRegistry.checkAddress('modbus-tcp', { ...coil, type: 'bit' })).toEqual([]);
    expect(shippedRegistry.checkAddress('modbus-tcp', { ...coil, type: 'u16' }, 'channels[1]')).toMatchObject(
      [{ field: 'channels[1].address.type' }],
    );
    expect(shippedRegistry.checkAddress('modbus-tcp', 'x')).toMatchObject([{ field: 'address' }]);
  });
});
