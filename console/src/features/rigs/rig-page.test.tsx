import { fireEvent, screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { RigStatus, Role } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

/** Serves the rig in a state to a person with a role, and opens its page. */
function openRig(role: Role, status: Partial<RigStatus>, more: Record<string, Handler> = {}) {
  const document = { ...demoRigDocument, status: { ...demoStatus, ...status } };
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(document),
    'GET /rigs/burner-1': () => json(document),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /runs': list(),
    ...more,
  });
  return { ...renderConsole('/rigs/burner-1'), seen };
}

const button = (name: string | RegExp) => screen.findByRole<HTMLButtonElement>('button', { name });
const moveField = () => screen.findByLabelText<HTMLInputElement>('Move Air trim to');

const trip: RigStatus['trip'] = {
  cause: 'interlock:co-high',
  message: 'Open the air damper and look at the flame.',
  at: '2026-03-01T10:00:00.000Z',
  by: null,
  later: [{ cause: 'stale:o2', at: '2026-03-01T10:00:01.000Z' }],
};

describe('arming', () => {
  it.each(['test-engineer', 'technician'] as const)('is open to a %s while the rig is idle', async (role) => {
    openRig(role, { phase: 'idle' });
    expect((await button('Arm')).disabled).toBe(false);
  });

  it.each(['safety-officer', 'reader', 'administrator'] as const)(
    'is closed to a %s, with the reason',
    async (role) => {
      openRig(role, { phase: 'idle' });
      expect((await button('Arm')).disabled).toBe(true);
      expect(screen.getAllByText('Needs the role test engineer or technician.').length).toBeGreaterThan(0);
    },
  );

  it('names what stands in the way, in words', async () => {
    openRig('technician', {
      phase: 'idle',
      armingObstacles: ['Interlock "Carbon monoxide high" is not clear.'],
    });
    expect((await button('Arm')).disabled).toBe(true);
    expect(screen.getByText('Interlock "Carbon monoxide high" is not clear.')).toBeDefined();
  });

  it('shows why the server refused it', async () => {
    openRig(
      'technician',
      { phase: 'idle' },
      {
        'POST /rigs/burner-1/arm': () => problem(409, 'rig.cannot-arm', 'The oxygen sensor is stale.'),
      },
    );
    fireEvent.click(await button('Arm'));
    expect((await screen.findByRole('alert')).textContent).toContain('The oxygen sensor is stale.');
  });

  it('shows the state that the server answers at once', async () => {
    openRig(
      'technician',
      { phase: 'idle' },
      {
        'POST /rigs/burner-1/arm': () => json({ ...demoStatus, phase: 'armed' }),
      },
    );
    fireEvent.click(await button('Arm'));
    expect((await button('Disarm')).disabled).toBe(false);
  });
});

describe('a manual move', () => {
  it('is closed while the rig is not armed, with the reason', async () => {
    openRig('technician', { phase: 'idle' });
    await screen.findByText('The rig is not armed.');
    expect((await moveField()).disabled).toBe(true);
  });

  it('stays inside the limits: the fault stands at the field and nothing is sent', async () => {
    const { seen } = openRig('technician', { phase: 'armed' });
    fireEvent.change(await moveField(), { target: { value: '21' } });
    fireEvent.click(await button('Move'));
    expect(await screen.findByText('Stay within \u22125 to 20 %.')).toBeDefined();
    expect((await moveField()).getAttribute('aria-invalid')).toBe('true');
    expect(seen.some(({ path }) => path.endsWith('/moves'))).toBe(false);
  });

  it('sends the number in the unit of the channel', async () => {
    const { seen } = openRig(
      'technician',
      { phase: 'armed' },
      {
        'POST /rigs/burner-1/moves': () => json({ ...demoStatus, phase: 'armed' }),
      },
    );
    fireEvent.change(await moveField(), { target: { value: '12,5' } });
    fireEvent.click(await button('Move'));
    await expect.poll(() => seen.at(-1)?.body).toEqual({ channel: 'airTrim', value: 12.5 });
  });
});

describe('a trip', () => {
  it('shows its first cause and what followed; a technician may not reset it', async () => {
    openRig('technician', { phase: 'tripped', trip });
    const banner = await screen.findByText(/Tripped: Open the air damper/);
    expect(banner).toBeDefined();
    expect(screen.getByText('interlock:co-high')).toBeDefined();
    expect(within(screen.getByRole('list', { name: 'What followed' })).getByText(/stale:o2/)).toBeDefined();
    expect((await button('Reset trip …')).disabled).toBe(true);
    expect((await button('Arm')).disabled).toBe(true);
  });

  it('is reset by a safety officer, only with a reason', async () => {
    const { seen } = openRig(
      'safety-officer',
      { phase: 'tripped', trip },
      {
        'POST /rigs/burner-1/reset': () => json(demoStatus),
      },
    );
    fireEvent.click(await button('Reset trip …'));
    fireEvent.click(await button('Reset trip'));
    expect(await screen.findByText('Give a reason: it goes into the record.')).toBeDefined();
    fireEvent.change(screen.getByLabelText('Reason'), { target: { value: 'Flame looked at' } });
    fireEvent.click(await button('Reset trip'));
    await expect
      .poll(() => seen.find(({ path }) => path.endsWith('/reset'))?.body)
      .toEqual({ reason: 'Flame looked at' });
  });
});

it('says which connection is down and why', async () => {
  openRig('technician', {
    phase: 'offline',
    connections: [
      { id: 'plc', isConnected: false, error: 'Connection refused by 127.0.0.1:1502.', injectedFault: null },
    ],
  });
  expect(await screen.findByText('Connection refused by 127.0.0.1:1502.')).toBeDefined();
});

it('says which channel does not come through although its connection is up, and why', async () => {
  openRig('technician', {
    channelFaults: [{ channel: 'o2', code: 'adapter.refused', message: 'Register 999 is refused.' }],
  });
  const faults = within(await screen.findByRole('list', { name: 'Channels that cannot be read' }));
  expect(faults.getByText('Oxygen in flue gas')).toBeDefined();
  expect(faults.getByText(/Register 999 is refused/)).toBeDefined();
});
