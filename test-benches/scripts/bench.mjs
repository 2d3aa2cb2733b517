// `npm run bench -- NAME… [--json]`: builds where needed and runs the benchmarks.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { compile, installDependencies, root } from './prepare.mjs';

try {
  await installDependencies({ isQuiet: true });
  await compile(['test-benches', 'orchestrator'], { isQuiet: true });
} catch (error) {
  console.error(error.message);
  process.exit(1);
}
const program = join(root, 'test-benches/dist/benchmarks/main.js');
const benchmarks = spawn(process.execPath, [program, ...process.argv.slice(2)], { stdio: 'inherit' });
process.on('SIGINT', () => {});
process.on('SIGTERM', () => benchmarks.kill('SIGTERM'));
benchmarks.on('exit', (code) => process.exit(code ?? 1));
