import { readFileSync } from 'node:fs';

const file = new URL('../package.json', import.meta.url);

/** The version of the product, which is that of the adapters that ship with it. */
export const productVersion = (JSON.parse(readFileSync(file, 'utf8')) as { version: string }).version;
