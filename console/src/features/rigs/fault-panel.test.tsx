import { fireEvent, screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { InjectedFault, Role } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const address = 'PUT /rigs/burner-1/connections/plc/fault';
const fault = { kind: 'freeze', probability: 1, seed: 1, fromS: 0, untilS: null, channels: ['o2'] } as const;
const injected: InjectedFault = {
  fault: { ...fault, channels: ['o2'] },
  by: 'engineer',
  at: '2026-03-01T10:00:00.000Z',
  isActive: true,
};
const statusWith = (injectedFault: InjectedFault | null) => ({
  ...demoStatus,
  connections: [{ id: 'plc', isConnected: true, error: null, injectedFault }],
});

function openRig(role: Role, isBench: boolean, onPut: Handler = () => json(statusWith(injected))) {
  const content = { ...demoRigDocument.content, isBench };
  const document = { ...demoRigDocument, content, status: statusWith(null) };
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(document),
    'GET /rigs/burner-1': () => json(document),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /rigs/burner-1/trips': list(),
    'GET /runs': list(),
    [address]: onPut,
  });
  renderConsole('/rigs/burner-1');
  return seen;
}

const panel = () => screen.findByRole('region', { name: 'Faults on this bench' });
const press = async (name: string) => fireEvent.click(within(await panel()).getByRole('button', { name }));
const set = async (name: RegExp | string, value: string) =>
  fireEvent.change(within(await panel()).getByLabelText(name), { target: { value } });

it('is not there for a rig that is no bench', async () => {
  openRig('test-engineer', false);
  expect(await screen.findByRole('region', { name: 'Connections and scan' })).toBeDefined();
  expect(screen.queryByRole('region', { name: 'Faults on this bench' })).toBeNull();
});

it('puts a fault on one channel, shows it at the connection, and takes it off', async () => {
  const seen = openRig('test-engineer', true, ({ body }) =>
    json(statusWith((body as { fault: unknown }).fault === null ? null : injected)),
  );
  await set('Fault', 'freeze');
  await set('Channels', 'o2');
  await press('Put fault on');
  await expect
    .poll(() => seen.at(-1)?.body)
    .toEqual({ fault: { kind: 'freeze', probability: 1, seed: 1, fromS: 0, channels: ['o2'] } });
  const connections = within(await screen.findByRole('region', { name: 'Connections and scan' }));
  expect((await connections.findByText(/Frozen values on o2, by engineer/)).textContent).toContain(
    'Fault put on purpose',
  );
  await press('Take fault off');
  await expect.poll(() => seen.at(-1)?.body).toEqual({ fault: null });
  await expect.poll(() => connections.queryByText(/Fault put on purpose/)).toBeNull();
});

it('sends nothing while a setting is missing, and says which', async () => {
  const seen = openRig('test-engineer', true);
  await press('Put fault on');
  expect(await within(await panel()).findByText('Needed.')).toBeDefined();
  expect(seen.some(({ method }) => method === 'PUT')).toBe(false);
});

it('shows what the server says at the field', async () => {
  openRig('test-engineer', true, () =>
    problem(400, 'request.invalid', 'The request has faults.', [
      { field: 'fault.delayMs', message: 'At most a minute.' },
    ]),
  );
  await set(/^Delay, ms/, '5');
  await press('Put fault on');
  expect((await within(await panel()).findAllByText(/At most a minute\./)).length).toBeGreaterThan(0);
  expect(
    within(await panel())
      .getByLabelText(/^Delay, ms/)
      .getAttribute('aria-invalid'),
  ).toBe('true');
});

it('is closed to a technician, with the reason', async () => {
  openRig('technician', true);
  const button = within(await panel()).getByRole<HTMLButtonElement>('button', { name: 'Put fault on' });
  expect(button.disabled).toBe(true);
  expect(within(await panel()).getByText('Needs the role test engineer.')).toBeDefined();
});
