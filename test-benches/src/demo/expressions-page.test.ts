import { readFileSync } from 'node:fs';
import { expressionHelp, objectiveExamples } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';

const page = readFileSync(new URL('../../../docs/expressions.md', import.meta.url), 'utf8');
/** Without what the formatter of the page changes: column widths, escapes, the rule below a table's head. */
const plain = (text: string) => text.replace(/\\/g, '').replace(/-{3,}/g, '---').replace(/ +/g, ' ');

describe('docs/expressions.md', () => {
  it('has the help of every operator and function as the code gives it, and no other', () => {
    const rows = plain(expressionHelp())
      .split('\n')
      .filter((line) => line.startsWith('| '));
    const present = plain(page)
      .split('\n')
      .filter((line) => line.startsWith('| '));
    expect(present).toEqual(rows);
  });

  it('shows every composite objective as it is tested', () => {
    for (const { title, expression, plain: tempting, validity } of objectiveExamples) {
      for (const part of [
        title,
        expression,
        `\`${tempting}\``,
        ...validity.map(({ condition }) => `\`${condition}\``),
      ]) {
        expect(page).toContain(part);
      }
    }
  });
});
