import { openBurnerBench } from './burner-bench.js';
import { burnerUsage, parseBurnerOptions, type BurnerOptions } from './burner-options.js';

function readOptions(): BurnerOptions {
  try {
    return parseBurnerOptions(process.argv.slice(2));
  } catch (error) {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n${burnerUsage}\n`);
    process.exit(2);
  }
}

function explain(error: unknown, options: BurnerOptions): string {
  if (error instanceof Error && 'code' in error && error.code === 'EADDRINUSE') {
    return `Port ${options.port} of ${options.host} is in use: choose another with --port, or end what uses it.`;
  }
  return error instanceof Error ? error.message : String(error);
}

const options = readOptions();
try {
  const bench = await openBurnerBench(options);
  const end = () => void bench.close().then(() => process.exit(0));
  process.once('SIGINT', end);
  process.once('SIGTERM', end);
  // Forked: whoever started the bench is gone, so nobody would end it.
  process.once('disconnect', end);
  const listening = { event: 'listening', port: bench.port };
  process.stdout.write(`${JSON.stringify(listening)}\n`);
  process.send?.(listening);
} catch (error) {
  process.stderr.write(`${explain(error, options)}\n`);
  process.exit(1);
}
