import { resolve } from 'node:path';
import { parseArgs } from 'node:util';

const usage = `Usage: npm run demo -- [options]
  --data DIR         data folder (default data/demo)
  --port N           port of console and API (default 4380)
  --bench-port N     port of the burner bench (default 15020); the others take the next free ones
  --bench-log FILE   what the burner bench itself saw, as JSON lines: writes, watchdog, truth
  --as-built         run what is built already: install and build nothing
  --new              begin anew with new passwords; the earlier data are kept beside it`;

/** @returns the options, or ends the program with a message */
export function demoOptions(root) {
  const text = { type: 'string' };
  const options = {
    data: text,
    port: text,
    'bench-port': text,
    'bench-log': text,
    'as-built': { type: 'boolean' },
    new: { type: 'boolean' },
    help: { type: 'boolean' },
  };
  let values;
  try {
    ({ values } = parseArgs({ options }));
  } catch (error) {
    refuse(error.message);
  }
  if (values.help) {
    console.log(usage);
    process.exit(0);
  }
  return {
    data: resolve(root, values.data ?? 'data/demo'),
    port: portOf('--port', values.port ?? '4380'),
    /** Null where not given: a new installation then takes 15020, an old one what it had. */
    benchPort: values['bench-port'] === undefined ? null : portOf('--bench-port', values['bench-port']),
    benchLog: values['bench-log'] ? resolve(values['bench-log']) : null,
    isAsBuilt: values['as-built'] ?? false,
    isNew: values.new ?? false,
  };
}

function portOf(name, text) {
  const port = Number(text);
  if (Number.isInteger(port) && port >= 1 && port <= 65_535) return port;
  return refuse(`${name}: give a port from 1 to 65535, not "${text}".`);
}

function refuse(message) {
  console.error(`${message}\n${usage}`);
  process.exit(2);
}
