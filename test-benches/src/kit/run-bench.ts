import type { BenchDefinition } from './bench-definition.js';
import { benchUsage, parseBenchOptions, type BenchOptions } from './bench-options.js';
import { openBench } from './open-bench.js';

/**
 * The program of a bench: options from the command line, one line `{"event":"listening", …}` on stdout (and the
 * same as a message where it was forked) with the `port` or `path`, and an end on SIGTERM, SIGINT and when
 * whoever forked it is gone.
 */
export async function runBench(
  definition: BenchDefinition,
  args: string[] = process.argv.slice(2),
): Promise<void> {
  if (args.includes('--help')) {
    process.stdout.write(`${benchUsage(definition)}\n`);
    return;
  }
  const options = readOptions(definition, args);
  try {
    const bench = await openBench(definition, options);
    const end = () => void bench.close().then(() => process.exit(0));
    process.once('SIGINT', end);
    process.once('SIGTERM', end);
    // Forked: whoever started the bench is gone, so nobody would end it.
    process.once('disconnect', end);
    const listening = { event: 'listening', ...bench.place };
    process.stdout.write(`${JSON.stringify(listening)}\n`);
    process.send?.(listening);
  } catch (error) {
    process.stderr.write(`${explain(error, options)}\n`);
    process.exit(1);
  }
}

function readOptions(definition: BenchDefinition, args: string[]): BenchOptions {
  try {
    return parseBenchOptions(definition, args);
  } catch (error) {
    const message = error instanceof Error ? error.message : String(error);
    process.stderr.write(`${message}\n${benchUsage(definition)}\n`);
    process.exit(2);
  }
}

function explain(error: unknown, { tcp }: BenchOptions): string {
  if (tcp && error instanceof Error && 'code' in error && error.code === 'EADDRINUSE') {
    return `Port ${tcp.port} of ${tcp.host} is in use: choose another with --port, or end what uses it.`;
  }
  return error instanceof Error ? error.message : String(error);
}
