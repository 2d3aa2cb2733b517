import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { loadRegistry } from '../registry.js';
import { loadPlugIn } from './load-plug-in.js';

const base = mkdtempSync(join(tmpdir(), 'plug-ins-'));
afterAll(() => rmSync(base, { recursive: true }));

/** Zod by its place, since a temporary folder has no packages of its own. */
const zod = import.meta.resolve('zod');

function write(path: string, text: string): void {
  mkdirSync(dirname(join(base, path)), { recursive: true });
  writeFileSync(join(base, path), text);
}

const source = (id: string, more: { contract?: string; open?: string; schema?: string } = {}) => `
import { z } from '${zod}';
export default {
  manifest: {
    id: '${id}', title: 'Thing ${id}', contract: '${more.contract ?? '^1.0.0'}',
    configurationSchema: ${more.schema ?? 'z.strictObject({ host: z.string() })'},
    addressSchema: z.strictObject({ name: z.string() }),
  },
  open: ${more.open ?? 'async () => { throw new Error("not here") }'},
};`;

/** The last listing, which is that of the one plug-in. */
async function listingOf(reference: string) {
  return (await loadRegistry([reference], base)).listings.at(-1);
}

describe('a plug-in is found', () => {
  it('as a folder with a package.json that names its entry', async () => {
    write(
      'good/package.json',
      '{"version":"1.2.3","type":"module","exports":{".":{"import":"./lib/main.js"}}}',
    );
    write('good/lib/main.js', source('good'));
    expect(await listingOf('./good')).toMatchObject({
      id: 'good',
      title: 'Thing good',
      version: '1.2.3',
      state: 'ready',
      origin: 'plug-in',
      reference: './good',
      configurationSchema: { required: ['host'] },
    });
  });

  it('as a single file', async () => {
    write('single.mjs', source('single'));
    expect(await listingOf(join(base, 'single.mjs'))).toMatchObject({
      id: 'single',
      state: 'ready',
      version: null,
    });
  });

  it('as an installed package', async () => {
    write('node_modules/@lab/thing/package.json', '{"version":"2.0.0","type":"module","main":"index.js"}');
    write('node_modules/@lab/thing/index.js', source('installed'));
    expect(await listingOf('@lab/thing')).toMatchObject({
      id: 'installed',
      state: 'ready',
      version: '2.0.0',
    });
  });

  it('with several adapters, of which one may be broken', async () => {
    write('pair.mjs', source('one').replace('export default', 'const one =') + '\nexport default [one, 7];');
    const { listings } = await loadRegistry(['./pair.mjs'], base);
    expect(listings.slice(-2).map(({ state }) => state)).toEqual(['ready', 'broken']);
  });
});

describe('a broken plug-in is listed with the reason', () => {
  it.each<[string, string, string, string]>([
    ['throws', 'throw new Error("no licence")', 'plug-in.not-loaded', 'no licence'],
    ['throws nothing', 'throw null', 'plug-in.not-loaded', 'null'],
    ['needs what is missing', 'import "nowhere-to-be-found"', 'plug-in.not-loaded', 'nowhere-to-be-found'],
    ['is no program', 'export default {', 'plug-in.not-loaded', 'It failed'],
    ['exports nothing', 'export const adapter = 1', 'plug-in.malformed', 'as default'],
    ['has no open', source('x', { open: 'undefined' }), 'plug-in.malformed', 'open'],
    ['has a bad id', source('Not An Id'), 'plug-in.malformed', 'manifest.id'],
    [
      'has no object schema',
      source('x', { schema: 'z.string()' }),
      'plug-in.malformed',
      'manifest.configurationSchema',
    ],
    ['has no form', source('x', { schema: 'z.object({ at: z.date() })' }), 'plug-in.malformed', 'as a form'],
    ['has no zod schema', source('x', { schema: '{}' }), 'plug-in.malformed', 'zod 4'],
    ['is of the future', source('x', { contract: '^2.0.0' }), 'plug-in.other-contract', '^2.0.0'],
    ['has an odd range', source('x', { contract: '>=1' }), 'plug-in.other-contract', '>=1'],
    ['takes a shipped id', source('modbus-tcp'), 'plug-in.duplicate', 'modbus-tcp'],
  ])('that %s', async (name, text, code, words) => {
    const file = `broken/${name.replaceAll(' ', '-')}.mjs`;
    write(file, text);
    const listing = await listingOf(`./${file}`);
    expect(listing).toMatchObject({ state: 'broken', error: { code }, configurationSchema: null });
    expect(listing?.error?.message).toContain(words);
  });

  it('that never comes to the end of its import', async () => {
    write('broken/endless.mjs', 'await new Promise(() => setInterval(() => {}, 1e6).unref())');
    const [loaded] = await loadPlugIn('./broken/endless.mjs', base, 50);
    expect(loaded?.error?.code).toBe('plug-in.not-loaded');
    expect(loaded?.error?.message).toContain('within 50 ms');
  });

  it('that is not there', async () => {
    for (const reference of ['./nowhere', 'not-installed', '@nobody/nothing']) {
      expect((await listingOf(reference))?.error?.code).toBe('plug-in.not-found');
    }
  });

  it('whose package.json leads nowhere', async () => {
    write('lost/package.json', '{"exports":"./missing.js"}');
    write('torn/package.json', '{');
    expect((await listingOf('./lost'))?.error?.message).toContain('missing.js');
    expect((await listingOf('./torn'))?.error?.code).toBe('plug-in.malformed');
  });

  it('and the others are used, the shipped ones first', async () => {
    write('fine.mjs', source('fine'));
    write('again.mjs', source('fine'));
    const registry = await loadRegistry(['./nowhere', './fine.mjs', './again.mjs'], base);
    expect([...registry.adapters.keys()]).toEqual(
      expect.arrayContaining(['modbus-tcp', 'in-memory', 'fine']),
    );
    expect(registry.listings.slice(-3).map(({ state }) => state)).toEqual(['broken', 'ready', 'broken']);
  });

  it('which is said where a connection asks for its adapter', async () => {
    write('old.mjs', source('old', { contract: '^9.0.0' }));
    const registry = await loadRegistry(['./old.mjs'], base);
    const [fault] = registry.checkConnection({ adapter: 'old', configuration: {} }, 'connections[0]');
    expect(fault?.field).toBe('connections[0].adapter');
    expect(fault?.message).toContain('written for contract ^9.0.0');
    expect(() => registry.find('old')).toThrow(expect.objectContaining({ code: 'adapter.unknown' }));
  });
});
