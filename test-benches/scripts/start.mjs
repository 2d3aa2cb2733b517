// `npm start`: prepares the checkout and runs the server alone; its settings come from the environment.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { prepare, root } from './prepare.mjs';

await prepare();
const server = spawn(process.execPath, [join(root, 'orchestrator/dist/main.js')], {
  cwd: root,
  stdio: 'inherit',
});
// A terminal sends the interrupt to both; the server brings its rigs to rest before it ends.
process.on('SIGINT', () => {});
process.on('SIGTERM', () => server.kill('SIGTERM'));
server.on('exit', (code) => process.exit(code ?? 1));
