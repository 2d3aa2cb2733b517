import { execFile } from 'node:child_process';
import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { afterAll, beforeAll, expect, it } from 'vitest';

const workspace = fileURLToPath(new URL('../..', import.meta.url));
const page = readFileSync(join(workspace, '../docs/write-an-adapter.md'), 'utf8');
const folder = mkdtempSync(join(tmpdir(), 'guide-'));
const run = promisify(execFile);

/** The files of the page as they stand, in a folder outside the repository, linked as `npm install <path>` does. */
beforeAll(() => {
  for (const [, name = '', text = ''] of page.matchAll(/^```\w+ file=(\S+)\n([\s\S]*?)^```$/gm)) {
    mkdirSync(dirname(join(folder, name)), { recursive: true });
    writeFileSync(join(folder, name), text);
  }
  mkdirSync(join(folder, 'node_modules/@cresthold'), { recursive: true });
  symlinkSync(workspace, join(folder, 'node_modules/@cresthold/adapters'));
});
afterAll(() => rmSync(folder, { recursive: true }));

/** Runs a file of the folder under node:test with the built kit, apart from this test runner. */
async function runTests(
  file: string,
  ...options: string[]
): Promise<{ passed: number; failed: number; text: string }> {
  if (!existsSync(join(workspace, 'dist/conformance/index.js')))
    throw new Error('Build the workspaces first.');
  const env = { ...process.env };
  // Set by a test runner around us; the inner one would report to it.
  delete env['NODE_TEST_CONTEXT'];
  const args = ['--test', '--test-reporter=tap', ...options, file];
  const { stdout } = await run(process.execPath, args, { cwd: folder, env }).catch(
    (error: { stdout: string }) => error,
  );
  const count = (name: string) => Number(new RegExp(`^# ${name} (\\d+)$`, 'm').exec(stdout)?.[1]);
  return { passed: count('pass'), failed: count('fail'), text: stdout };
}

it("the guide's adapter passes the kit, with the guide's files alone", async () => {
  const { passed, failed, text } = await runTests('test/adapter.test.js');
  expect(text.split('\n').filter((line) => /^\s*not ok/.test(line))).toEqual([]);
  expect(failed).toBe(0);
  expect(passed).toBeGreaterThan(40);
}, 60_000);

it('and fails it where the tags of its lines are not looked at, so that a late answer is taken for another', async () => {
  const session = readFileSync(join(folder, 'session.js'), 'utf8');
  writeFileSync(join(folder, 'session.js'), session.replace('got === tag ?', 'true ?'));
  const late = readFileSync(join(folder, 'test/bath.js'), 'utf8');
  // What is asked of a mute bath is answered later, all at once.
  writeFileSync(
    join(folder, 'test/bath.js'),
    late.replace(
      "if (bath.mode === 'mute') continue;",
      "if (bath.mode === 'mute') { setTimeout(() => socket.write(`${answer(line)}\\n`), 250); continue; }",
    ),
  );
  const { failed, text } = await runTests('test/adapter.test.js', '--test-name-pattern=silence');
  expect(failed).toBeGreaterThan(0);
  expect(text).toMatch(
    /not ok \d+ - silence is adapter\.timeout in time, and later answers are the right ones/,
  );
}, 60_000);
