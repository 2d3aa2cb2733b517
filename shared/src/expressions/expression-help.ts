import { expressionFunctions } from './expression-functions.js';
import { expressionOperators } from './expression-operators.js';
import { traceFunctions } from './trace-functions.js';

interface Entry {
  signature: string;
  purpose: string;
  help: string;
  example: string;
}

/** Tables of all operators and functions as Markdown: the body of `docs/expressions.md`. */
export function expressionHelp(): string {
  return [
    '## Operators',
    '',
    table(expressionOperators),
    '',
    '## Functions',
    '',
    table(expressionFunctions),
    '',
    '## Functions over traces',
    '',
    table(traceFunctions),
  ].join('\n');
}

function table(entries: readonly Entry[]): string {
  const rows = entries.map(({ signature, purpose, help, example }) => {
    const [call, value] = example.split(' // ');
    return `| \`${signature}\` | ${purpose} | ${help} | \`${call}\` = ${value} |`;
  });
  return ['| written | is | to know | example |', '| --- | --- | --- | --- |', ...rows].join('\n');
}
