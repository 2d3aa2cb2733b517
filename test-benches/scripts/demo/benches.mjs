// The benches of the demo beside the burner: where each is, and what is left out on this machine.
import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { isFreePort } from './ports.mjs';

const burner = 'burner';

/** All that are built, the burner left out. @returns name, and whether it is on a serial line */
async function furtherBenches(root) {
  const list = pathToFileURL(join(root, 'test-benches/dist/start-bench/benches.js'));
  const { benches } = await import(list.href);
  return benches
    .filter(({ name }) => name !== burner)
    .map(({ name, wire }) => ({ name, isOnLine: wire.kind !== 'modbus-tcp' }));
}

/**
 * Chooses a place for each: the next free ports after that of the burner, links in the data folder.
 *
 * @returns places by name
 */
export async function choosePlaces(root, data, benchPort) {
  const places = {};
  let port = benchPort;
  for (const { name, isOnLine } of await furtherBenches(root)) {
    if (isOnLine) {
      if (isSocatThere()) places[name] = join(data, `${name}.tty`);
      continue;
    }
    do port += 1;
    while (port <= 65_535 && !(await isFreePort(port)));
    if (port <= 65_535) places[name] = String(port);
  }
  return places;
}

/**
 * What to start of them, and what to say of those that cannot be.
 *
 * @param places by name, as the installation was made with
 * @returns benches as `{ name, args }`, and lines
 */
export async function startable(root, places) {
  const started = [];
  const lines = [];
  for (const { name, isOnLine } of await furtherBenches(root)) {
    const place = places[name];
    if (isOnLine && !isSocatThere()) {
      lines.push(`The ${name} bench is left out: it needs socat, which is not installed.`);
    } else if (place === undefined) {
      lines.push(`The ${name} bench is left out: these data were made without it. "--new" begins with all.`);
    } else if (!isOnLine && !(await isFreePort(Number(place)))) {
      lines.push(`The ${name} bench is left out: its port ${place} is in use.`);
    } else started.push({ name, args: isOnLine ? ['--pty', place] : ['--port', place] });
  }
  return { started, lines };
}

let hasSocat;
function isSocatThere() {
  hasSocat ??= spawnSync('socat', ['-V']).status === 0;
  return hasSocat;
}
