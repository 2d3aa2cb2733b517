import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { format, resolveConfig } from 'prettier';
import { expect, it } from 'vitest';
import { lawTablePage } from './law-table.js';

it('the page of the seeking laws is what the code gives', async () => {
  const page = join(import.meta.dirname, '../../../docs/seeking-laws.md');
  const text = await format(lawTablePage(), { ...(await resolveConfig(page)), parser: 'markdown' });
  // If it differs: node test-benches/scripts/law-table.mjs
  expect(readFileSync(page, 'utf8')).toBe(text);
}, 60_000);
