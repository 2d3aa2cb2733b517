import { existsSync, readFileSync, statSync } from 'node:fs';
import { dirname, isAbsolute, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { DomainError } from '@cresthold/shared';
import { z } from 'zod';

/** Where a plug-in begins, and what its package says of itself. */
export interface PlugInEntry {
  /** File that is imported; absolute. */
  file: string;
  /** Version of the package; null where it has none. */
  version: string | null;
}

const conditions = ['node', 'import', 'module', 'default'];

const packageSchema = z.object({
  version: z.string().optional(),
  main: z.string().optional(),
  exports: z.unknown().optional(),
});

/** Whether a reference is a path and no name of a package: it begins with `.` or `/`. */
export function isPath(reference: string): boolean {
  return reference.startsWith('.') || isAbsolute(reference);
}

/**
 * Finds the file with which a plug-in begins.
 *
 * @param reference a folder or file (it begins with `.` or `/`), or the name of an installed package
 * @param base folder from which paths and packages are looked for
 * @throws plug-in.not-found, plug-in.malformed where a folder's package.json leads nowhere
 */
export function findEntry(reference: string, base: string): PlugInEntry {
  const place = isPath(reference) ? resolve(base, reference) : installedPackage(reference, base);
  if (place === null || !existsSync(place)) {
    const where = isPath(reference) ? `at ${resolve(base, reference)}` : `installed at or above ${base}`;
    throw new DomainError('plug-in.not-found', `Nothing is ${where} for "${reference}".`);
  }
  if (statSync(place).isFile()) return { file: place, version: null };
  return entryOfFolder(place);
}

/** The folder of a package in the nearest `node_modules`, of the server's folder or of the product itself. */
function installedPackage(name: string, base: string): string | null {
  for (const start of [base, dirname(fileURLToPath(import.meta.url))]) {
    for (let folder = resolve(start); ; folder = dirname(folder)) {
      const candidate = join(folder, 'node_modules', name);
      if (existsSync(join(candidate, 'package.json'))) return candidate;
      if (folder === dirname(folder)) break;
    }
  }
  return null;
}

function entryOfFolder(folder: string): PlugInEntry {
  const packageFile = join(folder, 'package.json');
  const about = existsSync(packageFile) ? readPackage(packageFile) : {};
  const relative = entryOfExports(about.exports) ?? about.main ?? 'index.js';
  const file = join(folder, relative);
  if (existsSync(file)) return { file, version: about.version ?? null };
  const message = `${folder} has no file "${relative}": name the entry in "exports" of its package.json.`;
  throw new DomainError('plug-in.malformed', message, [{ field: 'exports', message }]);
}

function readPackage(file: string): z.infer<typeof packageSchema> {
  try {
    return packageSchema.parse(JSON.parse(readFileSync(file, 'utf8')));
  } catch (error) {
    const message = `${file} is no package.json: ${error instanceof Error ? error.message : String(error)}`;
    throw new DomainError('plug-in.malformed', message, [{ field: 'package.json', message }]);
  }
}

/** What `exports` of a package.json says of the package itself. */
function entryOfExports(exports: unknown): string | null {
  if (typeof exports === 'string') return exports;
  if (typeof exports !== 'object' || exports === null) return null;
  const table = exports as Record<string, unknown>;
  if ('.' in table) return entryOfExports(table['.']);
  for (const condition of conditions) {
    const entry = entryOfExports(table[condition]);
    if (entry !== null) return entry;
  }
  return null;
}
