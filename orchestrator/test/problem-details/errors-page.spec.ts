import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { errorCatalogue, errorCodes, type ErrorCode } from '@cresthold/shared';
import { statusOfKind } from '../../src/problem-details/error-kind-tables.js';

const page = readFileSync(join(__dirname, '../../../docs/errors.md'), 'utf8');

/** Entries of the page: code and text below its heading. */
const entries = page
  .split(/^### /m)
  .slice(1)
  .map((part) => {
    const [code = '', ...text] = part.split('\n');
    return { code, text: text.join('\n') };
  });

describe('docs/errors.md', () => {
  it('has one entry for every code of the catalogue and none besides', () => {
    expect(entries.map((entry) => entry.code).sort()).toEqual([...errorCodes].sort());
  });

  it.each(entries)(
    'says of $code its status, what it means, a likely cause and what to do',
    ({ code, text }) => {
      const { kind } = errorCatalogue[code as ErrorCode];
      expect(text).toMatch(new RegExp(`^\\s*Status ${statusOfKind[kind]}\\. \\S.{10,}`));
      expect(text).toMatch(/^- Likely cause: \S.{5,}/m);
      expect(text).toMatch(/^- What to do: \S.{5,}/m);
    },
  );
});
