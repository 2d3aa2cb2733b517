// `npm run start-bench -- BENCH [options]`: compiles the benches where that is due, and runs one of them until
// Ctrl-C. Without a name it lists them with their options.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { compile, installDependencies, root } from './prepare.mjs';

await installDependencies({ isQuiet: true });
await compile(['test-benches'], { isQuiet: true });
const program = join(root, 'test-benches/dist/start-bench/main.js');
const bench = spawn(process.execPath, [program, ...process.argv.slice(2)], { stdio: 'inherit' });
// A terminal sends the interrupt to both: the bench ends first.
process.on('SIGINT', () => {});
process.on('SIGTERM', () => bench.kill('SIGTERM'));
bench.on('exit', (code) => process.exit(code ?? 1));
