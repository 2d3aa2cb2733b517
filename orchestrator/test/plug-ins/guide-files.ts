import { mkdirSync, readFileSync, symlinkSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';

const root = join(__dirname, '../../..');

/** Writes the files of the guide into a folder, as a reader would, and links the kit as `npm install <path>` does. */
export function writeGuideFiles(folder: string): void {
  const page = readFileSync(join(root, 'docs/write-an-adapter.md'), 'utf8');
  for (const [, name = '', text = ''] of page.matchAll(/^```\w+ file=(\S+)\n([\s\S]*?)^```$/gm)) {
    const file = join(folder, name);
    mkdirSync(dirname(file), { recursive: true });
    writeFileSync(file, text);
  }
  linkKit(folder);
}

export function linkKit(folder: string): void {
  mkdirSync(join(folder, 'node_modules/@cresthold'), { recursive: true });
  symlinkSync(join(root, 'adapters'), join(folder, 'node_modules/@cresthold/adapters'));
}
