// The programs that the demo runs, and their end: nothing may be left behind.
import { fork } from 'node:child_process';
import { setTimeout as wait } from 'node:timers/promises';

/**
 * Starts a program in a process group of its own, so that Ctrl-C reaches only the demo, which then ends
 * the programs in their order: the server needs the bench until its rigs are at rest.
 *
 * @param options.onLine told every line that the program prints
 */
export function startProgram(title, path, args, { env = {}, execArgv = [], onLine = () => {} } = {}) {
  const child = fork(path, args, {
    detached: true,
    execArgv,
    env: { ...process.env, ...env },
    stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
  });
  for (const stream of [child.stdout, child.stderr]) eachLine(stream, onLine);
  const exited = new Promise((done) => {
    child.once('error', (error) => done(error.message));
    child.once('exit', (code, signal) => done(signal ?? `code ${code}`));
  });
  return { title, child, exited };
}

function eachLine(stream, onLine) {
  let rest = '';
  stream.setEncoding('utf8');
  stream.on('data', (text) => {
    const lines = (rest + text).split('\n');
    rest = lines.pop();
    lines.forEach(onLine);
  });
  stream.on('end', () => {
    if (rest !== '') onLine(rest);
  });
}

/** The next message of a program; rejects when it ends instead or takes too long. */
export function messageOf({ title, child, exited }, timeoutMs) {
  return Promise.race([
    new Promise((done) => child.once('message', done)),
    exited.then((how) => Promise.reject(new Error(`The ${title} ended (${how}) before it was ready.`))),
    wait(timeoutMs, undefined, { ref: false }).then(() =>
      Promise.reject(new Error(`The ${title} was not ready within ${timeoutMs / 1000} s.`)),
    ),
  ]);
}

/** Asks a program to end, and ends it with all that it started where it does not within the time. */
export async function endProgram({ title, child, exited }, boundMs) {
  if (child.exitCode !== null || child.signalCode !== null) return;
  child.kill('SIGTERM');
  const isInTime = await Promise.race([exited.then(() => true), wait(boundMs, false, { ref: false })]);
  if (isInTime) return;
  console.error(`The ${title} did not end within ${boundMs / 1000} s: it is ended by force.`);
  endGroup(child.pid);
  await exited;
}

/** Ends a process group by force; one that is gone already is fine. */
function endGroup(pid) {
  try {
    process.kill(-pid, 'SIGKILL');
  } catch (error) {
    if (error.code !== 'ESRCH') throw error;
  }
}
