import { fireEvent, screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import { sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const nobody: Handler = () => problem(401, 'auth.required', 'Sign in first.');
const notNeeded: Handler = () => json({ isNeeded: false });

async function fillIn(account: string, password: string) {
  fireEvent.change(await screen.findByLabelText('Account'), { target: { value: account } });
  fireEvent.change(screen.getByLabelText('Password'), { target: { value: password } });
  fireEvent.click(screen.getByRole('button', { name: 'Sign in' }));
}

it('leads whoever is not signed in to the door, and back to where they wanted to go', async () => {
  let isSignedIn = false;
  serve({
    'GET /auth/session': (request) => (isSignedIn ? json(sessionOf('technician')) : nobody(request)),
    'GET /setup': notNeeded,
    'POST /auth/sign-in': () => {
      isSignedIn = true;
      return json(sessionOf('technician'));
    },
    'GET /rigs': list(),
    'GET /objectives': list(),
  });
  const { router } = renderConsole('/objectives');
  await fillIn('technician', 'a password');
  expect(await screen.findByRole('heading', { level: 1, name: 'Objectives' })).toBeDefined();
  expect(router.state.location.pathname).toBe('/objectives');
});

it('says what the server says when account or password is wrong, and stays', async () => {
  serve({
    'GET /auth/session': nobody,
    'GET /setup': notNeeded,
    'POST /auth/sign-in': () => problem(401, 'auth.failed', 'Account or password is wrong.'),
  });
  renderConsole('/sign-in');
  await fillIn('technician', 'wrong');
  expect((await screen.findByRole('alert')).textContent).toContain('Account or password is wrong.');
});

it('asks for what is missing without asking the server', async () => {
  const seen = serve({ 'GET /auth/session': nobody, 'GET /setup': notNeeded });
  renderConsole('/sign-in');
  await fillIn('', '');
  expect(await screen.findByText('Enter your account.')).toBeDefined();
  expect(screen.getByText('Enter your password.')).toBeDefined();
  expect(seen.some(({ method }) => method === 'POST')).toBe(false);
});

it('goes to the first start where there is no administrator, and shows the faults of the fields there', async () => {
  serve({
    'GET /auth/session': nobody,
    'GET /setup': () => json({ isNeeded: true }),
    'POST /setup': () =>
      problem(400, 'request.invalid', 'The request has faults.', [
        { field: 'account', message: 'Use letters.' },
      ]),
  });
  renderConsole('/');
  for (const label of ['Set-up code', 'Account', 'Name or role', 'Password']) {
    fireEvent.change(await screen.findByLabelText(label), { target: { value: 'x y' } });
  }
  fireEvent.click(screen.getByRole('button', { name: 'Make administrator' }));
  expect(await screen.findByText('Use letters.')).toBeDefined();
});

it('asks for the code where the account has a second factor', async () => {
  const seen = serve({
    'GET /auth/session': nobody,
    'GET /setup': notNeeded,
    'POST /auth/sign-in': ({ body }) =>
      'code' in (body as object)
        ? problem(401, 'auth.code-wrong', 'The code is wrong.')
        : problem(401, 'auth.code-needed', 'Give the code as well.'),
  });
  renderConsole('/sign-in');
  await fillIn('technician', 'a password');
  fireEvent.change(await screen.findByLabelText('Code'), { target: { value: '123 456' } });
  expect(screen.queryByRole('alert')).toBeNull();
  fireEvent.click(screen.getByRole('button', { name: 'Sign in' }));
  expect((await screen.findByRole('alert')).textContent).toContain('The code is wrong.');
  expect(seen.at(-1)?.body).toEqual({ account: 'technician', password: 'a password', code: '123 456' });
});
