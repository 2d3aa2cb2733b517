import { pathToFileURL } from 'node:url';
import { DomainError } from '@cresthold/shared';
import type { Adapter } from '../contract.js';
import { asDomainError } from '../known-error.js';
import { checkAdapter } from './check-adapter.js';
import { findEntry } from './find-entry.js';

/** Longest time that a plug-in may take to be imported, ms. */
const defaultImportBoundMs = 5000;

const noManifest = { id: null, title: null, contract: null };

/** One adapter that a plug-in brings, or why it brings none. */
export type LoadedPlugIn = {
  /** What the configuration calls the plug-in. */
  reference: string;
  /** Version of its package; null where it has none. */
  version: string | null;
  /** What could be read of its manifest, even where it is broken. */
  id: string | null;
  title: string | null;
  contract: string | null;
} & ({ adapter: Adapter; error: null } | { adapter: null; error: DomainError });

/**
 * Imports a plug-in and checks what it exports; never throws: what is wrong is told as an outcome.
 *
 * @param reference a folder or file (it begins with `.` or `/`), or the name of an installed package
 * @param base folder from which paths and packages are looked for
 * @param importBoundMs longest time that its import may take, ms
 * @returns one entry for each adapter that it exports; one broken entry where it cannot be used at all
 */
export async function loadPlugIn(
  reference: string,
  base: string,
  importBoundMs = defaultImportBoundMs,
): Promise<LoadedPlugIn[]> {
  let version: string | null = null;
  try {
    const entry = findEntry(reference, base);
    version = entry.version;
    const exported = await importWithin(entry.file, importBoundMs);
    const adapters: unknown[] = Array.isArray(exported) ? exported : [exported];
    if (adapters.length === 0) throw new DomainError('plug-in.malformed', 'The array of adapters is empty.');
    return adapters.map((adapter) => checked(reference, version, adapter));
  } catch (error) {
    return [broken({ reference, version, ...noManifest }, error)];
  }
}

function checked(reference: string, version: string | null, exported: unknown): LoadedPlugIn {
  const about = {
    reference,
    version,
    id: textOf(exported, 'id'),
    title: textOf(exported, 'title'),
    contract: textOf(exported, 'contract'),
  };
  try {
    return { ...about, adapter: checkAdapter(exported), error: null };
  } catch (error) {
    return broken(about, error);
  }
}

function broken(about: Omit<LoadedPlugIn, 'adapter' | 'error'>, thrown: unknown): LoadedPlugIn {
  const known = asDomainError(thrown);
  const isOurs = known?.code.startsWith('plug-in.') === true;
  const error = isOurs ? known : new DomainError('plug-in.not-loaded', `It failed: ${reasonOf(thrown)}`);
  return { ...about, adapter: null, error };
}

async function importWithin(file: string, importBoundMs: number): Promise<unknown> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<never>((_, reject) => {
    timer = setTimeout(() => {
      const text = `It was not imported within ${importBoundMs} ms: does it wait for something at its top level?`;
      reject(new DomainError('plug-in.not-loaded', text));
    }, importBoundMs);
  });
  try {
    const module = (await Promise.race([import(pathToFileURL(file).href), tooLate])) as { default?: unknown };
    return module.default;
  } finally {
    clearTimeout(timer);
  }
}

function reasonOf(thrown: unknown): string {
  return thrown instanceof Error ? thrown.message : String(thrown);
}

/** A text of the manifest of something that may be no adapter; getters of a broken one may throw. */
function textOf(exported: unknown, field: keyof typeof noManifest): string | null {
  try {
    const value = (exported as { manifest?: Record<string, unknown> } | null)?.manifest?.[field];
    return typeof value === 'string' ? value : null;
  } catch {
    return null;
  }
}
