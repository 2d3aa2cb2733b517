import { readFileSync } from 'node:fs';
import { z } from 'zod';

const packageSchema = z.object({ version: z.string() });

/** What ran: the product and the runtime, for the record of a run. */
export function softwareVersions(): Record<string, string> {
  const file = new URL('../../package.json', import.meta.url);
  const { version } = packageSchema.parse(JSON.parse(readFileSync(file, 'utf8')));
  return { cresthold: version, node: process.versions.node, platform: `${process.platform}-${process.arch}` };
}
