import { fireEvent, screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { RigStatus, Role } from '@cresthold/shared';
import type { ProofTest, ProofTestDue } from '../../../api/index.js';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../../testing/documents.js';
import { json, list, serve, type Handler } from '../../../testing/fake-server.js';
import { renderConsole } from '../../../testing/render-console.js';

const envelope = {
  ...demoEnvelope,
  content: {
    ...demoEnvelope.content,
    interlocks: demoEnvelope.content.interlocks.map((lock) => ({ ...lock, proofTestEveryDays: 90 })),
  },
};
const due: ProofTestDue = {
  ...{ interlock: 'co-high', title: 'Carbon monoxide high', state: 'overdue', lastTest: null },
  ...{ dueAt: '2026-03-01T09:00:00.000Z', forbidsArmingAt: '2026-03-08T09:00:00.000Z' },
};
const begun: ProofTest = {
  ...{ id: 'test-1', rigId: 'burner-1', envelopeVersion: 3, interlock: 'co-high' },
  ...{ title: 'Carbon monoxide high', action: 'trip', method: 'forced', status: 'open', limitMs: 2100 },
  ...{ startedBy: 'technician', startedAt: '2026-03-09T09:00:00.000Z', conditionAt: null },
  ...{ responseMs: null, writes: null, outcome: null, note: null, signedBy: null, signedAt: null },
};
const measured: ProofTest = { ...begun, responseMs: 2034.5, writes: 1, conditionAt: begun.startedAt };

async function open(
  path: string,
  role: Role,
  status: Partial<RigStatus>,
  more: Record<string, Handler> = {},
) {
  const document = { ...demoRigDocument, status: { ...demoStatus, ...status } };
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(document),
    'GET /rigs/burner-1': () => json(document),
    'GET /rigs/burner-1/envelopes': list(envelope),
    'GET /rigs/burner-1/proof-tests/due': () => json([due]),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/trips': list(),
    'GET /runs': list(),
    ...more,
  });
  const console = renderConsole(path);
  await screen.findAllByText(/Burner 1/);
  await console.linkUp();
  await console.say({ type: 'rig-status', status: document.status });
  return seen;
}
const button = (name: string | RegExp) => screen.findByRole<HTMLButtonElement>('button', { name });

it('guides through a test: expected effect, measured response, signature', async () => {
  const seen = await open(
    '/rigs/burner-1/envelope',
    'technician',
    { phase: 'armed' },
    {
      'POST /rigs/burner-1/proof-tests': () => json(begun, 201),
      'GET /rigs/burner-1/proof-tests/test-1': () => json(measured),
      'POST /rigs/burner-1/proof-tests/test-1/sign': () =>
        json({
          ...measured,
          status: 'signed',
          outcome: 'pass',
          signedBy: 'technician',
          signedAt: begun.startedAt,
        }),
    },
  );
  expect(await screen.findByText('never tested: forbids arming')).toBeDefined();
  fireEvent.click(await button('Test Carbon monoxide high …'));
  const guide = within(await screen.findByRole('dialog'));
  expect(guide.getByRole('list', { name: 'Expected effect' }).textContent).toContain('Air trim: category 1');
  fireEvent.click(guide.getByRole('button', { name: 'Force the condition now' }));
  await guide.findByText(/2034.5 ms, at most 2100 ms expected/);
  fireEvent.click(guide.getByLabelText('Passed: it did as expected'));
  fireEvent.click(guide.getByRole('button', { name: 'Sign as technician' }));
  expect(await guide.findByText('Signed as passed')).toBeDefined();
  expect(seen.find(({ path }) => path.endsWith('/sign'))?.body).toEqual({ outcome: 'pass', note: '' });
});

it('cannot be signed as passed before the interlock has acted', async () => {
  await open(
    '/rigs/burner-1/envelope',
    'technician',
    { phase: 'armed' },
    {
      'POST /rigs/burner-1/proof-tests': () => json(begun, 201),
      'GET /rigs/burner-1/proof-tests/test-1': () => json(begun),
    },
  );
  fireEvent.click(await button('Test Carbon monoxide high …'));
  fireEvent.click(await button('Force the condition now'));
  fireEvent.click(await screen.findByLabelText('Passed: it did as expected'));
  expect((await button('Sign as technician')).disabled).toBe(true);
  expect(screen.getByText('The interlock has not acted: it cannot have passed.')).toBeDefined();
});

it('needs an armed rig, and arms one for proof tests', async () => {
  const seen = await open(
    '/rigs/burner-1/envelope',
    'technician',
    { phase: 'idle' },
    {
      'POST /rigs/burner-1/proof-tests/arm': () => json({ ...demoStatus, phase: 'armed' }),
    },
  );
  fireEvent.click(await button('Test Carbon monoxide high …'));
  expect((await button('Force the condition now')).disabled).toBe(true);
  fireEvent.click(await button('Arm for proof tests'));
  await expect.poll(async () => (await button('Force the condition now')).disabled).toBe(false);
  expect(seen.some(({ path }) => path.endsWith('/proof-tests/arm'))).toBe(true);
});

it('that forbids arming is named on the rig’s page', async () => {
  await open('/rigs/burner-1', 'technician', {});
  expect(await screen.findByText('Proof tests forbid arming')).toBeDefined();
});

it('that is due is among what needs a person on the floor', async () => {
  await open('/', 'technician', {});
  const need = await screen.findByRole('link', { name: /Proof test of Carbon monoxide high: never tested/ });
  expect(need.getAttribute('href')).toBe('/rigs/burner-1/envelope');
});
