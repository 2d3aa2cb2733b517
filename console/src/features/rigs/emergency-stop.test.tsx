import { fireEvent, screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { Role } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

function open(path: string, role: Role, more: Record<string, Handler>) {
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(demoRigDocument),
    'GET /rigs/burner-1': () => json(demoRigDocument),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /rigs/burner-1/trips': list(),
    'GET /runs': list(),
    'GET /objectives': list(),
    ...more,
  });
  renderConsole(path);
  return seen;
}

const stopsOf = (seen: { path: string }[]) => seen.filter(({ path }) => path.endsWith('/emergency-stop'));
const accept: Handler = () => json({ ...demoStatus, phase: 'stopping' });

it('stops the rig in view by one press, for a reader too, and says that it was accepted', async () => {
  const seen = open('/rigs/burner-1', 'reader', { 'POST /rigs/burner-1/emergency-stop': accept });
  fireEvent.click(await screen.findByRole('button', { name: /^STOP Burner 1/ }));
  expect(await screen.findByText(/emergency stop accepted/)).toBeDefined();
  expect(stopsOf(seen)).toHaveLength(1);
});

it('works by its keys wherever the focus is, once per press', async () => {
  const seen = open('/rigs/burner-1', 'technician', { 'POST /rigs/burner-1/emergency-stop': accept });
  const field = await screen.findByLabelText('Move Air trim to');
  fireEvent.keyDown(field, { key: 'S', ctrlKey: true, shiftKey: true });
  fireEvent.keyDown(field, { key: 'S', ctrlKey: true, shiftKey: true, repeat: true });
  await expect.poll(() => stopsOf(seen).length).toBe(1);
});

it('stops every rig from a page that is about none', async () => {
  const seen = open('/objectives', 'technician', { 'POST /rigs/emergency-stop': () => json({ items: [] }) });
  fireEvent.click(await screen.findByRole('button', { name: /^STOP ALL RIGS/ }));
  await expect.poll(() => stopsOf(seen).map(({ path }) => path)).toEqual(['/rigs/emergency-stop']);
});

it('stops every rig by one press from the page of one', async () => {
  const seen = open('/rigs/burner-1', 'reader', { 'POST /rigs/emergency-stop': () => json([demoStatus]) });
  fireEvent.click(await screen.findByRole('button', { name: 'ALL RIGS' }));
  expect(await screen.findByText(/All rigs: emergency stop accepted/)).toBeDefined();
  expect(stopsOf(seen).map(({ path }) => path)).toEqual(['/rigs/emergency-stop']);
});

it('says NOT STOPPED and what to do where the server refuses', async () => {
  open('/rigs/burner-1', 'technician', {
    'POST /rigs/burner-1/emergency-stop': () => problem(503, 'host.unavailable', 'The rig host has ended.'),
  });
  fireEvent.click(await screen.findByRole('button', { name: /^STOP Burner 1/ }));
  const alert = await screen.findByText(/NOT STOPPED: Burner 1/);
  expect(alert.textContent).toContain('Use the hard-wired stop now');
  expect(screen.getByText('The rig host has ended.')).toBeDefined();
});

it('says NOT STOPPED where the server cannot be reached', async () => {
  open('/rigs/burner-1', 'technician', {
    'POST /rigs/burner-1/emergency-stop': () => Promise.reject(new TypeError('Failed to fetch')),
  });
  fireEvent.click(await screen.findByRole('button', { name: /^STOP Burner 1/ }));
  expect(await screen.findByText(/NOT STOPPED/)).toBeDefined();
  expect(screen.getByText(/The server does not answer/)).toBeDefined();
});

it('never promises more than a software stop', async () => {
  open('/rigs/burner-1', 'reader', {});
  const button = await screen.findByRole('button', { name: /^STOP/ });
  const words = document.getElementById(button.getAttribute('aria-describedby') ?? '')?.textContent;
  expect(words).toContain('no safety function');
  expect(words).toContain('hard-wired');
});
