// The data folder of the demo: made once with the scenario, found again at later starts.
import { execFile } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { choosePlaces } from './benches.mjs';

const run = promisify(execFile);

/** What a later start must know; the password of the one account that starts the run is among it. */
const noteName = 'demo.json';

/**
 * The installation of earlier, or null where the folder has none.
 *
 * @throws Error where the folder holds something else
 */
export function foundInstallation(data) {
  const note = join(data, noteName);
  if (existsSync(note)) return JSON.parse(readFileSync(note, 'utf8'));
  if (!existsSync(join(data, 'cresthold.sqlite'))) return null;
  throw new Error(
    `${data} holds data that are not the demo's, or a first start that was broken off: choose another folder with --data, or begin anew with --new.`,
  );
}

/** Puts the data of earlier aside. @returns where they are now, or null where there were none */
export function putAside(data) {
  if (!existsSync(data)) return null;
  const kept = `${data}-until-${new Date().toISOString().replace(/[:.]/g, '-')}`;
  renameSync(data, kept);
  return kept;
}

/** Loads the scenario into a new data folder. @returns the accounts with their passwords, and the note */
export async function makeInstallation(root, data, benchPort) {
  mkdirSync(data, { recursive: true });
  const printer = join(root, 'test-benches/dist/demo/print-scenario.js');
  const benches = await choosePlaces(root, data, benchPort);
  const further = Object.entries(benches).flatMap(([name, place]) => ['--bench', `${name}=${place}`]);
  const { stdout } = await run(process.execPath, [printer, '--bench-port', String(benchPort), ...further]);
  const { users, start } = await loadScenario(root, data, stdout);
  const { password } = users.find(({ account }) => account === start.by);
  const installation = { benchPort, benches, ...start, password };
  writeFileSync(join(data, noteName), `${JSON.stringify(installation, null, 2)}\n`, { mode: 0o600 });
  return { users, installation };
}

async function loadScenario(root, data, text) {
  const folder = mkdtempSync(join(tmpdir(), 'cresthold-demo-'));
  try {
    const file = join(folder, 'scenario.json');
    writeFileSync(file, text);
    const loader = join(root, 'orchestrator/dist/load-scenario.js');
    const env = { ...process.env, CRESTHOLD_DATA: data };
    const { stdout } = await run(process.execPath, [loader, file], { env });
    return JSON.parse(stdout);
  } catch (error) {
    throw new Error(`The demo scenario could not be loaded: ${error.stderr || error.message}`, {
      cause: error,
    });
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
