// `npm run demo`: prepares the checkout, then runs all benches and the server with the demo scenario, and has a
// seeking run on the burner going. Ctrl-C ends all of it, in order.
import { createWriteStream } from 'node:fs';
import { join } from 'node:path';
import { untilHealthy } from './demo/api.mjs';
import { startable } from './demo/benches.mjs';
import { endProgram, messageOf, startProgram } from './demo/children.mjs';
import { foundInstallation, makeInstallation, putAside } from './demo/installation.mjs';
import { demoOptions } from './demo/options.mjs';
import { requireFreePort } from './demo/ports.mjs';
import { startSeeking } from './demo/seeking-run.mjs';
import { prepare, root } from './prepare.mjs';

/** A rig host takes up to 25 s to bring its rig to rest, ms. */
const serverEndMs = 35_000;
const benchEndMs = 5_000;

const options = demoOptions(root);
const programs = { server: null, benches: [] };
let isEnding = false;

async function end(code) {
  if (isEnding) return;
  isEnding = true;
  if (programs.server) await endProgram(programs.server, serverEndMs);
  await Promise.all(programs.benches.map((bench) => endProgram(bench, benchEndMs)));
  process.exit(code);
}

function onSignal() {
  if (isEnding) console.log('Still ending: the rig is brought to rest first.');
  else console.log('\nEnding: the rig is brought to rest, then server and bench end …');
  void end(0);
}
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, onSignal);

/** Ends all where a program ends by itself. */
function watch(program, logFile) {
  void program.exited.then((how) => {
    if (isEnding) return;
    console.error(`The ${program.title} ended by itself (${how}): the demo ends. See ${logFile}.`);
    void end(1);
  });
}

async function startBurner(port) {
  await requireFreePort(port, 'burner bench', '--bench-port');
  const args = ['--port', String(port), ...(options.benchLog ? ['--log', options.benchLog] : [])];
  const { bench, log } = await startBench('burner', args, 'bench.log');
  watch(bench, log.file);
}

async function startBench(name, args, logName = `${name}.log`) {
  const log = logTo(logName);
  const bench = startProgram(`${name} bench`, join(root, `test-benches/dist/${name}/main.js`), args, log);
  programs.benches.push(bench);
  await messageOf(bench, 10_000);
  return { bench, log };
}

/** Starts the benches beside the burner; one that does not start is said and left out. @returns lines */
async function startOtherBenches(places) {
  const { started, lines } = await startable(root, places);
  const starting = started.map(({ name, args }) =>
    startBench(name, args).then(
      () => [],
      (error) => [`The ${name} bench is left out. ${error.message}`],
    ),
  );
  return [...lines, ...(await Promise.all(starting)).flat()];
}

async function startServer(base) {
  const log = logTo('server.log');
  programs.server = startProgram('server', join(root, 'orchestrator/dist/main.js'), [], {
    ...log,
    execArgv: ['--import', join(root, 'test-benches/scripts/demo/end-with-demo.mjs')],
    env: {
      NO_COLOR: '1',
      CRESTHOLD_DATA: options.data,
      CRESTHOLD_PORT: String(options.port),
      CRESTHOLD_HOST: '127.0.0.1',
      CRESTHOLD_CONSOLE: join(root, 'console/dist'),
      CRESTHOLD_DEMO_PID: String(process.pid),
    },
  });
  watch(programs.server, log.file);
  await untilHealthy(base, 60_000);
}

function logTo(name) {
  const file = join(options.data, name);
  const stream = createWriteStream(file, { flags: 'a' });
  return { file, onLine: (line) => stream.write(`${line}\n`) };
}

/** @returns the installation, and the lines about its accounts */
async function openInstallation() {
  const kept = options.isNew ? putAside(options.data) : null;
  const found = foundInstallation(options.data);
  if (found === null) {
    const { users, installation } = await makeInstallation(root, options.data, options.benchPort ?? 15_020);
    const width = Math.max(...users.map(({ account }) => account.length));
    const lines = users.map(({ account, password }) => `  ${account.padEnd(width)}  ${password}`);
    if (kept !== null) lines.push(`The earlier data are kept in ${kept}.`);
    return { installation, lines: ['Accounts and passwords, shown this once:', ...lines] };
  }
  if (options.benchPort !== null && options.benchPort !== found.benchPort) {
    throw new Error(
      `The rig in ${options.data} expects its bench at port ${found.benchPort}: leave --bench-port away, or begin anew with --new.`,
    );
  }
  const line =
    'The passwords were shown at the first start. "npm run demo -- --new" begins anew with new ones.';
  return { installation: found, lines: [line] };
}

async function main() {
  if (!options.isAsBuilt) await prepare();
  await requireFreePort(options.port, 'server', '--port');
  const { installation, lines } = await openInstallation();
  const [benchLines] = await Promise.all([
    startOtherBenches(installation.benches ?? {}),
    startBurner(installation.benchPort),
  ]);
  const base = `http://127.0.0.1:${options.port}`;
  await startServer(base);
  // What keeps the run from starting is no reason to end the server: people can clear it on the screens.
  const started = await startSeeking(base, installation).then(
    (path) => `A seeking run is under way: ${base}${path}`,
    (error) => `No seeking run was started. ${error.message}`,
  );
  console.log(
    [
      '',
      `Cresthold is at ${base}`,
      started,
      ...lines,
      ...benchLines,
      'All rigs are simulated. The stop on the screens is a software stop and no safety function: a real rig',
      'needs its own hard-wired emergency stop.',
      'Ctrl-C ends all of it.',
    ].join('\n'),
  );
}

try {
  await main();
} catch (error) {
  if (!isEnding) console.error(error.message);
  await end(1);
}
