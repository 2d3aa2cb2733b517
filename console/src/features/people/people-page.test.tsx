import { fireEvent, screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { SignedInPlace, User } from '../../api/index.js';
import { demoRigDocument, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const technician: User = {
  account: 'technician',
  title: 'Technician',
  roles: ['technician', 'reader'],
  rigLimits: [{ role: 'technician', rigs: ['burner-1'] }],
  isEnabled: true,
  createdAt: '2026-03-01T08:00:00.000Z',
};

const place: SignedInPlace = {
  id: 'one',
  userAgent: 'Mozilla/5.0 (X11; Linux) AppleWebKit/537.36 (KHTML, like Gecko) Bench/1.0 Safari/537.36',
  address: '127.0.0.1',
  beganAt: '2026-03-01T08:00:00.000Z',
  lastSeenAt: '2026-03-01T09:00:00.000Z',
  isThis: false,
};

const base = {
  'GET /auth/session': () => json(sessionOf('administrator')),
  'GET /rigs': list(demoRigDocument),
  'GET /users': list(technician),
  'GET /users/technician/sessions': () => json({ items: [place] }),
};

it('shows which rigs a role reaches, and gives a role every rig again', async () => {
  const seen = serve({ ...base, 'PATCH /users/technician': () => json(technician) });
  renderConsole('/people');
  expect(await screen.findByText('technician on burner-1; reader')).toBeDefined();
  fireEvent.click(screen.getByRole('button', { name: 'Roles … of Technician' }));
  const group = within(await screen.findByRole('group', { name: 'Rigs for technician' }));
  expect((await group.findByLabelText<HTMLInputElement>('Burner 1')).checked).toBe(true);
  fireEvent.click(group.getByLabelText('Burner 1'));
  expect(screen.getByRole<HTMLButtonElement>('button', { name: 'Save roles' }).disabled).toBe(true);
  fireEvent.click(group.getByLabelText('every rig'));
  fireEvent.click(screen.getByRole('button', { name: 'Save roles' }));
  await expect
    .poll(() => seen.find(({ method }) => method === 'PATCH')?.body)
    .toEqual({ roles: ['technician', 'reader'], rigLimits: [] });
});

it('ends a session of somebody else', async () => {
  const seen = serve({ ...base, 'DELETE /users/technician/sessions/one': () => json(null) });
  renderConsole('/people');
  fireEvent.click(await screen.findByRole('button', { name: 'Access … of Technician' }));
  expect(await screen.findByText('Bench (X11)')).toBeDefined();
  fireEvent.click(await screen.findByRole('button', { name: /^End the session since/ }));
  await expect.poll(() => seen.some(({ method }) => method === 'DELETE')).toBe(true);
});

it('asks for the password again where the server wants it, and then goes on by itself', async () => {
  let isGiven = false;
  const seen = serve({
    ...base,
    'POST /users/technician/second-factor/reset': () =>
      isGiven ? json(null) : problem(403, 'auth.reauthentication-needed', 'Give your password again.'),
    'POST /auth/reauthenticate': ({ body }) => {
      isGiven = (body as { password: string }).password === 'right';
      return isGiven
        ? json({ until: '2026-03-01T09:05:00.000Z' })
        : problem(401, 'auth.failed', 'Account or password is wrong.');
    },
  });
  renderConsole('/people');
  fireEvent.click(await screen.findByRole('button', { name: 'Access … of Technician' }));
  fireEvent.click(await screen.findByRole('button', { name: 'Reset second factor of Technician …' }));
  fireEvent.change(await screen.findByLabelText('Reason'), { target: { value: 'Lost at sea.' } });
  fireEvent.click(screen.getByRole('button', { name: 'Reset second factor' }));
  const give = async (password: string) => {
    fireEvent.change(await screen.findByLabelText('Your password'), { target: { value: password } });
    fireEvent.click(screen.getByRole('button', { name: 'Go on' }));
  };
  await give('wrong');
  expect(await screen.findByText(/Account or password is wrong/)).toBeDefined();
  await give('right');
  expect(await screen.findByText('The second factor of Technician is taken away')).toBeDefined();
  const sent = seen.filter(({ path }) => path.endsWith('/reset')).map(({ body }) => body);
  expect(sent).toEqual([{ reason: 'Lost at sea.' }, { reason: 'Lost at sea.' }]);
});

it('leaves it undone where the password is not given', async () => {
  serve({
    ...base,
    'POST /users/technician/second-factor/reset': () =>
      problem(403, 'auth.reauthentication-needed', 'Give your password again first.'),
  });
  renderConsole('/people');
  fireEvent.click(await screen.findByRole('button', { name: 'Access … of Technician' }));
  fireEvent.click(await screen.findByRole('button', { name: 'Reset second factor of Technician …' }));
  fireEvent.change(await screen.findByLabelText('Reason'), { target: { value: 'Lost at sea.' } });
  fireEvent.click(screen.getByRole('button', { name: 'Reset second factor' }));
  const dialog = await screen.findByRole('dialog', { name: 'Your password, please' });
  fireEvent.click(within(dialog).getByRole('button', { name: 'Cancel' }));
  expect(await screen.findByText(/Give your password again first/)).toBeDefined();
});
