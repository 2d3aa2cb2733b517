import { fireEvent, screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { EnvelopeDocument, Session } from '../../api/index.js';
import { demoEnvelope, demoRigDocument, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const draft: EnvelopeDocument = {
  ...demoEnvelope,
  id: 'env-4',
  version: 4,
  status: 'draft',
  revision: 7,
  submittedBy: null,
  decidedBy: null,
  decidedAt: null,
  reason: null,
};

function open(session: Session, envelopes: EnvelopeDocument[], more: Record<string, Handler> = {}) {
  const seen = serve({
    'GET /auth/session': () => json(session),
    'GET /rigs': list(demoRigDocument),
    'GET /rigs/burner-1': () => json(demoRigDocument),
    'GET /rigs/burner-1/envelopes': list(...envelopes),
    ...more,
  });
  renderConsole('/rigs/burner-1/envelope');
  return seen;
}

const cell = (name: string) => screen.findByLabelText<HTMLInputElement>(`${name} of Air trim`);

/** What stands below a field. */
const helpOf = (field: HTMLElement) =>
  document.getElementById(field.getAttribute('aria-describedby') ?? '')?.textContent;

it('names each fault at its cell and sends nothing', async () => {
  const seen = open(sessionOf('test-engineer'), [draft, demoEnvelope]);
  fireEvent.change(await cell('Lower limit'), { target: { value: '30' } });
  fireEvent.change(await cell('Slew limit'), { target: { value: 'fast' } });
  fireEvent.click(screen.getByRole('button', { name: 'Save draft' }));
  expect(await screen.findByText('Enter a number.')).toBeDefined();
  expect((await cell('Slew limit')).getAttribute('aria-invalid')).toBe('true');
  expect(helpOf(await cell('Slew limit'))).toBe('Enter a number.');
  fireEvent.change(await cell('Slew limit'), { target: { value: '2' } });
  await expect
    .poll(async () => helpOf(await cell('Lower limit')))
    .toBe('The lower limit must be below the upper limit.');
  expect(seen.some(({ method }) => method === 'PUT')).toBe(false);
});

it('saves numbers against the revision that was read', async () => {
  const seen = open(sessionOf('test-engineer'), [draft, demoEnvelope], {
    'PUT /envelopes/env-4': () => json({ ...draft, revision: 8 }),
  });
  fireEvent.change(await cell('Upper limit'), { target: { value: '18,5' } });
  fireEvent.click(screen.getByRole('button', { name: 'Save draft' }));
  await expect.poll(() => seen.find(({ method }) => method === 'PUT')?.headers.get('If-Match')).toBe('"7"');
  const sent = seen.find(({ method }) => method === 'PUT')?.body as { content: EnvelopeDocument['content'] };
  expect(sent.content.limits[0]?.max).toBe(18.5);
});

it('shows the faults that only the server finds at their fields too', async () => {
  open(sessionOf('test-engineer'), [draft, demoEnvelope], {
    'PUT /envelopes/env-4': () =>
      problem(400, 'request.invalid', 'The request has faults.', [
        { field: 'content.interlocks[0].condition', message: 'The rig has no channel "cox".' },
      ]),
  });
  const condition = await screen.findByLabelText<HTMLInputElement>('Unsafe when');
  fireEvent.change(condition, { target: { value: 'cox > 400' } });
  fireEvent.click(screen.getByRole('button', { name: 'Save draft' }));
  await expect.poll(() => helpOf(screen.getByLabelText('Unsafe when'))).toBe('The rig has no channel "cox".');
});

it('shows what differs from the envelope in force while it is edited', async () => {
  open(sessionOf('test-engineer'), [draft, demoEnvelope]);
  fireEvent.change(await cell('Upper limit'), { target: { value: '15' } });
  const panel = await screen.findByRole('region', { name: 'Against version 3 in force' });
  await expect.poll(() => panel.textContent).toContain('Air trim · Upper limit20 → 15');
});

it('never lets its author approve it, and says so', async () => {
  const author = { ...sessionOf('safety-officer'), account: 'test-engineer' };
  open(author, [{ ...draft, status: 'submitted', submittedBy: 'test-engineer' }, demoEnvelope]);
  const approve = await screen.findByRole<HTMLButtonElement>('button', { name: 'Approve …' });
  expect(approve.disabled).toBe(true);
  expect(screen.getAllByText('You wrote this version: somebody else must decide.').length).toBe(2);
});

it('is approved by another with the role, with a reason', async () => {
  const seen = open(sessionOf('safety-officer'), [{ ...draft, status: 'submitted' }, demoEnvelope], {
    'POST /envelopes/env-4/approve': () => json({ ...draft, status: 'in-force' }),
  });
  fireEvent.click(await screen.findByRole('button', { name: 'Approve …' }));
  const dialog = await screen.findByRole('dialog');
  fireEvent.change(within(dialog).getByLabelText('Reason'), { target: { value: 'Checked' } });
  fireEvent.click(within(dialog).getByRole('button', { name: 'Approve' }));
  await expect
    .poll(() => seen.find(({ path }) => path.endsWith('/approve'))?.body)
    .toEqual({ reason: 'Checked' });
});

it('edits hysteresis, latching, bypass and proof tests of an interlock; what is left empty is none', async () => {
  const seen = open(sessionOf('test-engineer'), [draft, demoEnvelope], {
    'PUT /envelopes/env-4': () => json({ ...draft, revision: 8 }),
  });
  const field = (name: string) => screen.findByLabelText<HTMLInputElement>(name);
  fireEvent.change(await field('Clears only when'), { target: { value: 'co < 350' } });
  fireEvent.change(await field('and that for'), { target: { value: '1,5' } });
  fireEvent.change(await field('Latches'), { target: { value: 'true' } });
  fireEvent.change(await field('Proof test every'), { target: { value: '90' } });
  fireEvent.click(screen.getByRole('button', { name: 'Oxygen in flue gas is an emergency-stop input' }));
  fireEvent.click(screen.getByRole('button', { name: 'Save draft' }));
  await expect.poll(() => seen.find(({ method }) => method === 'PUT')).toBeDefined();
  const sent = seen.find(({ method }) => method === 'PUT')?.body as { content: EnvelopeDocument['content'] };
  expect(sent.content.interlocks[0]).toMatchObject({
    clearCondition: 'co < 350',
    clearDelayS: 1.5,
    isLatching: true,
    bypassAtMostS: null,
    proofTestEveryDays: 90,
  });
  expect(sent.content.emergencyStopInputs).toEqual([
    { channel: 'o2', title: 'Oxygen in flue gas', pressedWhen: 'zero' },
  ]);
});

it('shows all that holds for an interlock in words', async () => {
  const [lock] = demoEnvelope.content.interlocks;
  const interlocks = lock
    ? [{ ...lock, clearCondition: 'co < 350', clearDelayS: 2, proofTestEveryDays: 90 }]
    : [];
  open(sessionOf('reader'), [{ ...demoEnvelope, content: { ...demoEnvelope.content, interlocks } }], {
    'GET /rigs/burner-1/proof-tests/due': () => json([]),
  });
  expect(await screen.findByText('clears only when co < 350 for 2 s')).toBeDefined();
  expect(screen.getByText('never bypassed')).toBeDefined();
  expect(screen.getByText('proof test every 90 days, 7 days of grace')).toBeDefined();
});

it('has a cause-and-effect table to print', async () => {
  open(sessionOf('reader'), [demoEnvelope]);
  const link = await screen.findByRole('link', { name: 'Cause-and-effect table, to print' });
  fireEvent.click(link);
  const table = await screen.findByRole('table', { name: 'Cause and effect' });
  expect(
    within(table).getByText('category 1, order 0: ramped to rest, released at 10 %', {
      selector: 'tr:nth-of-type(2) td',
    }),
  ).toBeDefined();
  expect(screen.getByRole('button', { name: 'Print' })).toBeDefined();
});
