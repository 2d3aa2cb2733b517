// Makes the checkout ready to run: the right Node.js, the dependencies of the lock file, a fresh build.
// Only what ships with Node.js is imported, since this runs before anything is installed.
import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join, relative, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

export const root = resolve(fileURLToPath(import.meta.url), '../../..');

const workspaces = ['shared', 'adapters', 'test-benches', 'orchestrator', 'console'];
/** Hash of the lock file that was installed; goes with the folder when npm clears it. */
const installStamp = join(root, 'node_modules/.cresthold-install');
const buildStamp = join(root, 'node_modules/.cresthold-build');
/** Written by the build itself, so their change is no reason to build. */
const generated = new Set(['console/src/api/schema.d.ts', 'orchestrator/openapi.json']);
const outputs = ['orchestrator/dist/main.js', 'test-benches/dist/burner/main.js', 'console/dist/index.html'];

/** Ends the program with a message where the Node.js is too old. */
export function checkNode() {
  const { engines } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8'));
  const [major, minor] = /(\d+)\.(\d+)/.exec(engines.node).slice(1).map(Number);
  const [ownMajor, ownMinor] = process.versions.node.split('.').map(Number);
  if (ownMajor > major || (ownMajor === major && ownMinor >= minor)) return;
  console.error(
    `Cresthold needs Node.js ${major}.${minor} or newer; this is ${process.versions.node}. Install a newer one and start again.`,
  );
  process.exit(1);
}

/**
 * Runs npm to its end.
 *
 * @param options.isQuiet sends its output to stderr, so that stdout stays with the caller
 */
export function npm(args, { isQuiet = false } = {}) {
  return new Promise((done, fail) => {
    const child = spawn('npm', args, {
      cwd: root,
      stdio: ['ignore', isQuiet ? 2 : 'inherit', 'inherit'],
      shell: process.platform === 'win32',
    });
    child.on('error', fail);
    child.on('exit', (code, signal) => {
      if (code === 0) done();
      else fail(new Error(`"npm ${args.join(' ')}" ended with ${signal ?? code}; its messages are above.`));
    });
  });
}

/** Installs the dependencies where they are missing or not those of the lock file. */
export async function installDependencies(options) {
  checkNode();
  if (isInstalled()) return;
  console.error('Installing the dependencies; one of them is compiled, which takes a minute or two …');
  await npm(['ci', '--no-audit', '--no-fund'], options);
  writeFileSync(installStamp, lockFileHash());
}

function lockFileHash() {
  return createHash('sha256')
    .update(readFileSync(join(root, 'package-lock.json')))
    .digest('hex');
}

function isInstalled() {
  const isStamped = existsSync(installStamp) && readFileSync(installStamp, 'utf8') === lockFileHash();
  return isStamped || isInstalledByHand();
}

/** Compares what the lock file asks for with what npm noted, so that an installation by hand is left alone. */
function isInstalledByHand() {
  const noted = join(root, 'node_modules/.package-lock.json');
  if (!existsSync(noted)) return false;
  const wanted = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8')).packages;
  const present = JSON.parse(readFileSync(noted, 'utf8')).packages;
  return Object.entries(wanted).every(([path, entry]) => {
    // Workspaces are links to this checkout; what names a system or is optional may be for another platform.
    const isOwn = !path.includes('node_modules/') || entry.link;
    if (isOwn || entry.optional || entry.devOptional || entry.os || entry.cpu) return true;
    return present[path]?.version === entry.version;
  });
}

/** Builds everything where a source differs from the last build. */
export async function buildIfStale(options) {
  const sources = fingerprint();
  const isFresh =
    existsSync(buildStamp) &&
    readFileSync(buildStamp, 'utf8') === sources &&
    outputs.every((output) => existsSync(join(root, output)));
  if (isFresh) return;
  console.error('Building …');
  await npm(['run', '--silent', 'build'], options);
  writeFileSync(buildStamp, sources);
}

/** Compiles workspaces and what they stand on, without bundle and client; quick where nothing has changed. */
export const compile = (names, options) => npm(['exec', '--', 'tsc', '-b', ...names], options);

/** One text that changes with the time or size of any file that the build reads. */
function fingerprint() {
  const hash = createHash('sha256');
  const note = (file) => {
    const { mtimeMs, size } = statSync(file);
    hash.update(`${relative(root, file)} ${mtimeMs} ${size}\n`);
  };
  ['package.json', 'package-lock.json', 'tsconfig.base.json', 'tsconfig.json'].forEach((name) =>
    note(join(root, name)),
  );
  for (const workspace of workspaces) sourcesOf(join(root, workspace)).forEach(note);
  return hash.digest('hex');
}

function sourcesOf(folder) {
  return readdirSync(folder, { withFileTypes: true })
    .sort((a, b) => (a.name < b.name ? -1 : 1))
    .flatMap((entry) => {
      const path = join(folder, entry.name);
      if (entry.isDirectory())
        return ['dist', 'node_modules', 'data'].includes(entry.name) ? [] : sourcesOf(path);
      const isSource = /\.(ts|tsx|json|html|css|js|svg|woff2?)$/.test(entry.name);
      return isSource && !generated.has(relative(root, path)) ? [path] : [];
    });
}

/** All of it. */
export async function prepare(options) {
  try {
    await installDependencies(options);
    await buildIfStale(options);
  } catch (error) {
    console.error(error.message);
    process.exit(1);
  }
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await prepare();
