import { parseArgs } from 'node:util';
import type { Benchmark, BenchmarkResult } from './benchmark.types.js';

export const benchUsage = `Usage: npm run bench -- NAME… [--json] [--full]
       npm run bench -- --list
  NAME    a benchmark, a group of them ("law-step"), or "all"
  --json  one JSON object a line
  --full  as many repetitions as a reported figure needs, where that is more
  --list  what there is`;

/** What one call of the command asks for, or why it cannot be done. */
export type BenchCommand =
  | { kind: 'list' }
  | { kind: 'run'; chosen: Benchmark[]; isJson: boolean; isFull: boolean }
  | { kind: 'refused'; message: string };

export function parseBenchCommand(args: string[], known: readonly Benchmark[]): BenchCommand {
  const options = {
    json: { type: 'boolean' },
    full: { type: 'boolean' },
    list: { type: 'boolean' },
  } as const;
  let parsed;
  try {
    parsed = parseArgs({ args, options, allowPositionals: true });
  } catch (error) {
    return refused(error instanceof Error ? error.message : String(error));
  }
  const { values, positionals } = parsed;
  if (values.list) return { kind: 'list' };
  if (positionals.length === 0) return refused('Name at least one benchmark.');
  const names = positionals.includes('all') ? known.map(({ name }) => name) : [...new Set(positionals)];
  const unknown = names.filter((name) => !known.some((benchmark) => isMeant(name, benchmark)));
  if (unknown.length > 0) {
    const all = known.map(({ name }) => name).join(', ');
    return refused(
      `There is no benchmark ${unknown.map((name) => `"${name}"`).join(', ')}. There are: ${all}.`,
    );
  }
  const chosen = new Set(names.flatMap((name) => known.filter((benchmark) => isMeant(name, benchmark))));
  return { kind: 'run', chosen: [...chosen], isJson: values.json ?? false, isFull: values.full ?? false };
}

/** A benchmark goes by its name, or by that of its group: what stands before the stroke. */
function isMeant(name: string, benchmark: Benchmark): boolean {
  return benchmark.name === name || benchmark.name.startsWith(`${name}/`);
}

function refused(message: string): BenchCommand {
  return { kind: 'refused', message: `${message}\n${benchUsage}` };
}

/** One result as a line for people. */
export function resultLine({ name, value, unit, ratio, against, heapGrowthBytes }: BenchmarkResult): string {
  const figure = value >= 100 ? Math.round(value).toLocaleString('en') : value.toPrecision(3);
  const line = `${name.padEnd(24)} ${figure.padStart(10)} ${unit.padEnd(8)} ${ratio.toFixed(2).padStart(6)} × ${against}`;
  if (heapGrowthBytes === undefined) return line;
  return `${line}; heap ${(heapGrowthBytes / 1024).toFixed(0)} KiB in 10 million`;
}
