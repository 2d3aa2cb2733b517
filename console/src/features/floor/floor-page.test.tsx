import { screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const session: Handler = () => json(sessionOf('safety-officer'));
const withRig = (...envelopes: unknown[]) => ({
  'GET /auth/session': session,
  'GET /rigs': list(demoRigDocument),
  'GET /rigs/burner-1/envelopes': list(...envelopes),
});

it('says that it is loading', async () => {
  serve({ 'GET /auth/session': session, 'GET /rigs': () => new Promise<Response>(() => undefined) });
  renderConsole('/');
  expect(await screen.findByText('Loading rigs …')).toBeDefined();
});

it('says what to do where there is no rig', async () => {
  serve({ 'GET /auth/session': session, 'GET /rigs': list() });
  renderConsole('/');
  expect(await screen.findByText('No rig yet')).toBeDefined();
});

it('shows why the rigs could not be loaded, and a way to try again', async () => {
  serve({
    'GET /auth/session': session,
    'GET /rigs': () => problem(500, 'server.bug', 'The server met a fault.'),
  });
  renderConsole('/');
  const alert = await screen.findByRole('alert');
  expect(alert.textContent).toContain('The server met a fault.');
  expect(within(alert).getByRole('button', { name: 'Try again' })).toBeDefined();
});

it('shows each rig with what the live link says of it, not what the document said', async () => {
  serve(withRig(demoEnvelope));
  const console = renderConsole('/');
  const card = await screen.findByRole('article', { name: 'Burner 1' });
  expect(within(card).getByText('idle')).toBeDefined();
  await console.linkUp();
  await console.say({
    type: 'rig-status',
    status: {
      ...demoStatus,
      phase: 'running',
      runId: 'run-1',
      activeSteps: ['seek'],
      bestPoint: { airTrim: 12.34 },
    },
  });
  expect(within(card).getByText('running')).toBeDefined();
  expect(within(card).getByRole('link', { name: 'seek' }).getAttribute('href')).toBe('/runs/run-1');
  expect(card.textContent).toContain('12.3 %');
});

it('says what needs a person', async () => {
  serve(withRig({ ...demoEnvelope, id: 'env-4', version: 4, status: 'submitted', author: 'test-engineer' }));
  renderConsole('/');
  expect(await screen.findByRole('link', { name: 'Decide on envelope version 4' })).toBeDefined();
});

it('says plainly when the live link is lost', async () => {
  serve(withRig(demoEnvelope));
  const console = renderConsole('/');
  await screen.findByRole('article', { name: 'Burner 1' });
  await console.linkUp();
  await console.linkLost();
  expect(screen.getByRole('alert').textContent).toContain('Live data lost, reconnecting');
});
