import { fireEvent, screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import { sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';
import { passwordObstacle } from './password-hint.js';

const base = {
  'GET /auth/session': () =>
    json({ ...sessionOf('safety-officer'), rigLimits: [{ role: 'safety-officer', rigs: ['burner-1'] }] }),
  'GET /rigs': list(),
  'GET /auth/sessions': () => json({ items: [] }),
  'GET /auth/second-factor': () => json({ isSetUp: false, isNeededToApprove: true, recoveryCodesLeft: 0 }),
};

it('says what one may do where, and that the station asks for a second factor', async () => {
  serve(base);
  renderConsole('/account');
  expect(await screen.findByText('safety officer on burner-1')).toBeDefined();
  expect(await screen.findByText(/This station asks for it/)).toBeDefined();
});

it('counts what is missing to a new password by length alone', () => {
  expect(passwordObstacle('owl kite', false)).toBe('7 characters more are needed.');
  expect(passwordObstacle('owl kite', true)).toBeNull();
  expect(passwordObstacle('fifteen owls XY', false)).toBeNull();
  expect(passwordObstacle('🦉'.repeat(14), false)).toBe('One character more is needed.');
});

it('changes the password, and shows what is wrong with the new one at its field', async () => {
  serve({
    ...base,
    'POST /auth/password': () =>
      problem(400, 'user.weak-password', 'Choose a longer one.', [
        { field: 'newPassword', message: 'This password is built on a common one.' },
      ]),
  });
  renderConsole('/account');
  fireEvent.click(await screen.findByRole('button', { name: 'Change password …' }));
  fireEvent.change(screen.getByLabelText('Present password'), { target: { value: 'the present one' } });
  const button = screen.getByRole<HTMLButtonElement>('button', { name: 'Change password' });
  fireEvent.change(screen.getByLabelText('New password'), { target: { value: 'short' } });
  expect(button.disabled).toBe(true);
  fireEvent.change(screen.getByLabelText('New password'), { target: { value: 'passwordpassword' } });
  fireEvent.click(button);
  expect(await screen.findByText('This password is built on a common one.')).toBeDefined();
});

it('sets a second factor up: secret, first code, recovery codes', async () => {
  serve({
    ...base,
    'POST /auth/second-factor': () => json({ secret: 'MZXW 6YTB', uri: 'otpauth://totp/x?secret=MZXW6YTB' }),
    'POST /auth/second-factor/confirm': () => json({ recoveryCodes: ['AAAAA-BBBBB'] }),
  });
  renderConsole('/account');
  fireEvent.click(await screen.findByRole('button', { name: 'Set up …' }));
  fireEvent.change(screen.getByLabelText('Password', { selector: 'input' }), {
    target: { value: 'the present one' },
  });
  fireEvent.click(screen.getByRole('button', { name: 'Show the secret' }));
  expect(await screen.findByText('MZXW 6YTB')).toBeDefined();
  fireEvent.change(screen.getByLabelText('Code'), { target: { value: '123456' } });
  fireEvent.click(screen.getByRole('button', { name: 'Set up' }));
  expect(await screen.findByText('AAAAA-BBBBB')).toBeDefined();
  fireEvent.click(screen.getByRole('button', { name: 'I have put them away' }));
  expect(screen.queryByText('AAAAA-BBBBB')).toBeNull();
});
