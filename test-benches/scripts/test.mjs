// `npm test`: installs what it needs, builds, and runs every check. The last line is `N passed, N failed`.
// `--long` adds the suites that repeat kills and run full property counts.
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { availableParallelism, tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { installDependencies } from './prepare.mjs';

const root = resolve(fileURLToPath(import.meta.url), '../../..');
const isLong = process.argv.includes('--long');
const reports = mkdtempSync(join(tmpdir(), 'cresthold-test-'));
const totals = { passed: 0, failed: 0 };

/**
 * Runs a program to its end; resolves to its exit code.
 *
 * @param isHeld true keeps its output back until it has ended, so that programs can run side by side
 */
function run(command, args, { cwd = root, env = {}, isHeld = false } = {}) {
  return new Promise((done) => {
    const output = isHeld ? 'pipe' : 'inherit';
    const child = spawn(command, args, {
      cwd,
      stdio: ['ignore', output, output],
      env: { ...process.env, ...env },
    });
    const held = [];
    child.stdout?.on('data', (chunk) => held.push(chunk));
    child.stderr?.on('data', (chunk) => held.push(chunk));
    child.on('error', (error) => {
      console.error(`${command}: ${error.message}`);
      done(1);
    });
    child.on('close', (code) => {
      process.stdout.write(Buffer.concat(held));
      done(code ?? 1);
    });
  });
}

function heading(text) {
  console.log(`\n== ${text}`);
}

/** A check that passes or fails as a whole. */
async function check(title, command, args, options) {
  heading(title);
  const isPassed = (await run(command, args, options)) === 0;
  totals[isPassed ? 'passed' : 'failed'] += 1;
  return isPassed;
}

/** A test runner that leaves counts in a JSON report of Jest's form. A report that is missing is a failure. */
async function suite(title, command, args, options) {
  heading(title);
  const report = join(reports, `${title.replace(/\W+/g, '-')}.json`);
  const code = await run(command, [...args, report], options);
  if (!existsSync(report)) {
    totals.failed += 1;
    return;
  }
  const counts = JSON.parse(readFileSync(report, 'utf8'));
  totals.passed += counts.numPassedTests;
  totals.failed += counts.numFailedTests;
  // A suite that broke outside its tests, or a runner that failed without a failed test.
  if (code !== 0 && counts.numFailedTests === 0) totals.failed += 1;
}

async function ensureChromium() {
  if (existsSync(process.env.CRESTHOLD_CHROMIUM ?? '/usr/bin/chromium')) return;
  heading('Chromium for the browser tests');
  const install = 'apt-get install -y --no-install-recommends chromium';
  const code = await run('sh', ['-c', `${install} || (apt-get update && ${install})`]);
  if (code !== 0) {
    console.error('Could not install Chromium. Install it by hand, or name a binary in CRESTHOLD_CHROMIUM.');
  }
}

/** Debian packages of the peers that the adapters are tested against, each with a file that shows it is there. */
const peerPackages = {
  gcc: '/usr/bin/gcc',
  'libc6-dev': '/usr/include/stdio.h',
  'libmodbus-dev': '/usr/include/modbus/modbus.h',
  mbpoll: '/usr/bin/mbpoll',
  'python3-pymodbus': '/usr/lib/python3/dist-packages/pymodbus/__init__.py',
  // Recommended by python3-pymodbus, and its server does not start without it.
  'python3-serial-asyncio': '/usr/lib/python3/dist-packages/serial_asyncio/__init__.py',
  socat: '/usr/bin/socat',
};

async function ensurePeers() {
  const missing = Object.entries(peerPackages)
    .filter(([, file]) => !existsSync(file))
    .map(([name]) => name);
  if (missing.length === 0) return;
  heading(`Peers for the tests of the wires: ${missing.join(', ')}`);
  const install = `apt-get install -y --no-install-recommends ${missing.join(' ')}`;
  const code = await run('sh', ['-c', `${install} || (apt-get update && ${install})`]);
  if (code !== 0) console.error(`Could not install ${missing.join(', ')}: install them by hand.`);
}

function finish() {
  rmSync(reports, { recursive: true, force: true });
  console.log(`\n${totals.passed} passed, ${totals.failed} failed`);
  process.exit(totals.failed === 0 ? 0 : 1);
}

await installDependencies();
await ensureChromium();
await ensurePeers();
const isTyped =
  (await check('Types', 'npm', ['run', '--silent', 'build:types'])) &&
  (await check('OpenAPI document and client', 'npm', ['run', '--silent', 'build:api']));
if (!isTyped) finish();
// The linter keeps one core busy for longer than all of the other checks take on another.
const linted = check('Lint, beside what follows', 'npm', ['run', '--silent', 'lint'], { isHeld: true });
const isBuilt = await check('Console build', 'npm', ['run', '--silent', 'build:console']);
await check('OpenAPI document and client as committed', 'git', [
  'diff',
  '--exit-code',
  '--stat',
  '--',
  'orchestrator/openapi.json',
  'console/src/api/schema.d.ts',
]);
await check('Format', 'npm', ['run', '--silent', 'format:check']);
await linted;
if (!isBuilt) finish();

const long = isLong ? { CRESTHOLD_LONG: '1' } : {};
const vitest = ['vitest', 'run', '--reporter=default', '--reporter=json'];
// By itself vitest leaves one core alone, which halves a machine of two.
const workers = `--maxWorkers=${availableParallelism()}`;
await suite('Unit tests', 'npx', [...vitest, workers, '--outputFile.json'], { env: long });
// Server tests wait for processes more than they compute: one worker more than there are cores pays.
await suite(
  'Server tests',
  'npx',
  ['jest', `--maxWorkers=${availableParallelism() + 1}`, '--json', '--outputFile'],
  {
    cwd: join(root, 'orchestrator'),
    env: long,
  },
);
await suite(
  'Browser tests',
  'npx',
  [...vitest, '--config', 'console/e2e/vitest.config.ts', '--outputFile.json'],
  {
    env: long,
  },
);
finish();
