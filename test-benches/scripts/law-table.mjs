// `node test-benches/scripts/law-table.mjs`: runs every seeking law on every plant and writes docs/seeking-laws.md.
// `--check` writes nothing and fails if the page is not what the code gives.
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { format, resolveConfig } from 'prettier';
import { compile, installDependencies, root } from './prepare.mjs';

await installDependencies({ isQuiet: true });
await compile(['test-benches'], { isQuiet: true });
const { lawTablePage } = await import('../dist/law-table/law-table.js');
const page = join(root, 'docs/seeking-laws.md');
const text = await format(lawTablePage(), { ...(await resolveConfig(page)), parser: 'markdown' });
if (!process.argv.includes('--check')) {
  writeFileSync(page, text);
  console.log(`Wrote ${page}`);
} else if (readFileSync(page, 'utf8') !== text) {
  console.error(
    'docs/seeking-laws.md is not what the code gives: run node test-benches/scripts/law-table.mjs',
  );
  process.exit(1);
}
