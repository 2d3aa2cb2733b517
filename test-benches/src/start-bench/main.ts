import { benchUsage } from '../kit/bench-options.js';
import { runBench } from '../kit/run-bench.js';
import { benches } from './benches.js';

/** `main.js NAME [options]` runs a bench; without a name it lists them, `main.js NAME --help` says what one can. */
const [name, ...args] = process.argv.slice(2);
const bench = benches.find((candidate) => candidate.name === name);
if (bench) await runBench(bench, args);
else {
  const list = benches.map((one) => `  ${one.name.padEnd(10)} ${one.title} (${one.wire.kind})`);
  const usage = ['Usage: npm run start-bench -- BENCH [options]', 'Benches:', ...list].join('\n');
  if (name === undefined || name === '--help') {
    process.stdout.write(`${[usage, ...benches.map(benchUsage)].join('\n\n')}\n`);
  } else {
    process.stderr.write(`There is no bench "${name}".\n${usage}\n`);
    process.exit(2);
  }
}
