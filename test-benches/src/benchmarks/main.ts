import { parseBenchCommand, resultLine } from './bench-command.js';
import { benchmarks } from './benchmarks.js';

const command = parseBenchCommand(process.argv.slice(2), benchmarks);
if (command.kind === 'refused') {
  console.error(command.message);
  process.exit(2);
}
if (command.kind === 'list') {
  for (const { name, purpose } of benchmarks) console.log(`${name.padEnd(24)} ${purpose}`);
  process.exit(0);
}
for (const benchmark of command.chosen) {
  try {
    const result = await benchmark.run({ isFull: command.isFull });
    console.log(command.isJson ? JSON.stringify(result) : resultLine(result));
  } catch (error) {
    console.error(`${benchmark.name}: ${error instanceof Error ? error.message : String(error)}`);
    process.exitCode = 1;
  }
}
