// `node test-benches/scripts/sized-table.mjs`: identifies every bench, sizes every law for it, lets it seek, and writes
// docs/sized-seeking.md. It takes some minutes.
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { format, resolveConfig } from 'prettier';
import { compile, installDependencies, root } from './prepare.mjs';

await installDependencies({ isQuiet: true });
await compile(['test-benches'], { isQuiet: true });
const { sizedTablePage } = await import('../dist/sized-seeking/sized-table.js');
const page = join(root, 'docs/sized-seeking.md');
writeFileSync(page, await format(sizedTablePage(), { ...(await resolveConfig(page)), parser: 'markdown' }));
console.log(`Wrote ${page}`);
