import { fireEvent, screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { RigStatus, Role } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type FakeRequest, type Handler } from '../../testing/fake-server.js';
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
    'GET /rigs/burner-1/trips': list(),
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
    fireEvent.pointerDown(await button('Hold to move Air trim'));
    expect(await screen.findByText('Stay within \u22125 to 20 %.')).toBeDefined();
    expect((await moveField()).getAttribute('aria-invalid')).toBe('true');
    expect(seen.some(({ path }) => path.endsWith('/moves'))).toBe(false);
  });

  const moving = {
    'POST /rigs/burner-1/moves': () => json({ ...demoStatus, phase: 'armed' }),
    'POST /rigs/burner-1/moves/release': () => json({ ...demoStatus, phase: 'armed' }),
  };
  const movesOf = (seen: FakeRequest[]) => seen.filter(({ path }) => path.endsWith('/moves'));
  const releasesOf = (seen: FakeRequest[]) => seen.filter(({ path }) => path.endsWith('/release'));
  type Held = { channel: string; value: number; hold: { id: string; forS: number } };

  it('goes on while the button is held, by renewals of one press, and ends with it', async () => {
    const { seen } = openRig('technician', { phase: 'armed' }, moving);
    fireEvent.change(await moveField(), { target: { value: '12,5' } });
    const hold = await button('Hold to move Air trim');
    fireEvent.pointerDown(hold);
    expect(hold.getAttribute('aria-pressed')).toBe('true');
    await expect.poll(() => movesOf(seen).length).toBeGreaterThan(1);
    fireEvent.pointerUp(hold);
    expect(hold.getAttribute('aria-pressed')).toBe('false');
    await expect.poll(() => releasesOf(seen).length).toBe(1);
    const bodies = movesOf(seen).map(({ body }) => body as Held);
    const [first] = bodies;
    expect(first).toMatchObject({ channel: 'airTrim', value: 12.5, hold: { forS: 1 } });
    expect(new Set(bodies.map(({ hold: { id } }) => id)).size).toBe(1);
    expect(releasesOf(seen)[0]?.body).toEqual({ channel: 'airTrim', holdId: first?.hold.id });
    const count = movesOf(seen).length;
    await new Promise((resolve) => setTimeout(resolve, 400));
    expect(movesOf(seen)).toHaveLength(count);
  });

  it.each<[string, (target: HTMLElement) => void]>([
    ['the pointer leaves the button', (target) => fireEvent.pointerLeave(target)],
    ['the touch is taken away', (target) => fireEvent.pointerCancel(target)],
    ['another window comes up', () => fireEvent(window, new Event('blur'))],
    ['the page goes away', () => fireEvent(window, new Event('pagehide'))],
    ['the network goes', () => fireEvent(window, new Event('offline'))],
  ])('ends when %s', async (_, happen) => {
    const { seen } = openRig('technician', { phase: 'armed' }, moving);
    const hold = await button(/Hold to move Air trim up, at most to 20 %/);
    fireEvent.pointerDown(hold);
    await expect.poll(() => movesOf(seen)[0]?.body).toMatchObject({ value: 20 });
    happen(hold);
    await expect.poll(() => releasesOf(seen).length).toBe(1);
    // What is asked for waits while the network is gone.
    fireEvent(window, new Event('online'));
  });

  it('works by a held key, and says how it works', async () => {
    const { seen } = openRig('technician', { phase: 'armed' }, moving);
    const hold = await button(/Hold to move Air trim down/);
    const words = document.getElementById(hold.getAttribute('aria-describedby') ?? '')?.textContent;
    expect(words).toContain('only while a button is held');
    fireEvent.keyDown(hold, { key: ' ' });
    fireEvent.keyDown(hold, { key: ' ', repeat: true });
    await expect.poll(() => movesOf(seen)[0]?.body).toMatchObject({ value: -5 });
    fireEvent.keyUp(hold, { key: ' ' });
    await expect.poll(() => releasesOf(seen).length).toBe(1);
  });

  it('ends, and says why, when a renewal is refused', async () => {
    openRig(
      'technician',
      { phase: 'armed' },
      {
        ...moving,
        'POST /rigs/burner-1/moves': () => problem(409, 'move.held-by-another', 'engineer holds this.'),
      },
    );
    fireEvent.pointerDown(await button(/Hold to move Air trim up/));
    expect(await screen.findByText('engineer holds this.')).toBeDefined();
    expect((await button(/Hold to move Air trim up/)).getAttribute('aria-pressed')).toBe('false');
  });
});

describe('a lockout', () => {
  const lockout = {
    id: 'one',
    rigId: 'burner-1',
    by: 'colleague',
    reason: 'Hands in the burner',
    at: '2026-03-01T10:00:00.000Z',
    mayLift: ['deputy'],
  };

  it('says who holds the rig, why, and who may lift it; nobody else is offered to', async () => {
    openRig('technician', { isLockedOut: true }, { 'GET /rigs/burner-1/lockouts': () => json([lockout]) });
    expect(await screen.findByText('colleague')).toBeDefined();
    const entries = screen.getByRole('list', { name: 'Lockouts' }).textContent;
    expect(entries).toContain('Hands in the burner');
    expect(entries).toContain('Lifted by colleague, or by deputy.');
    expect(screen.queryByRole('button', { name: /Lift lockout/ })).toBeNull();
  });

  it('is lifted with a reason by a safety officer where nobody is named', async () => {
    const { seen } = openRig(
      'safety-officer',
      { isLockedOut: true },
      {
        'GET /rigs/burner-1/lockouts': () => json([{ ...lockout, mayLift: [] }]),
        'POST /rigs/burner-1/lockouts/one/lift': () => json([]),
      },
    );
    fireEvent.click(await button('Lift lockout of colleague …'));
    fireEvent.change(screen.getByLabelText('Reason'), { target: { value: 'Work is done' } });
    fireEvent.click(await button('Lift lockout'));
    await expect
      .poll(() => seen.find(({ path }) => path.endsWith('/lift'))?.body)
      .toEqual({ reason: 'Work is done' });
  });

  it('is set by a technician, who names who else may lift it', async () => {
    const { seen } = openRig('technician', {}, { 'POST /rigs/burner-1/lockouts': () => json(lockout, 201) });
    fireEvent.click(await button('Lock out …'));
    fireEvent.change(screen.getByLabelText('Reason'), { target: { value: 'Rewiring' } });
    fireEvent.change(screen.getByLabelText(/Who else may lift it/), { target: { value: 'officer, deputy' } });
    fireEvent.click(await button('Lock out'));
    await expect
      .poll(() => seen.find(({ method, path }) => method === 'POST' && path.endsWith('/lockouts'))?.body)
      .toEqual({ reason: 'Rewiring', mayLift: ['officer', 'deputy'] });
  });
});

describe('the trips of a rig', () => {
  it('show how each actuator came to rest', async () => {
    const summary = {
      id: 'one',
      rigId: 'burner-1',
      trip,
      resetAt: '2026-03-01T10:05:00.000Z',
      resetBy: 'officer',
      resetReason: 'Flame looked at',
      timesToRest: [{ channel: 'airTrim', timeS: 2.346 }],
    };
    const rows = [
      { tS: 0, values: [10, 10] },
      { tS: 2.4, values: [0, 0] },
    ];
    const trajectory = {
      columns: ['airTrim', 'airTrim.applied'],
      rows,
      timesToRest: summary.timesToRest,
      isAtRest: true,
    };
    openRig(
      'reader',
      {},
      {
        'GET /rigs/burner-1/trips': list(summary),
        'GET /rigs/burner-1/trips/one': () => json({ ...summary, trajectory }),
      },
    );
    expect(await screen.findByText(/Reset by officer at .*: Flame looked at/)).toBeDefined();
    fireEvent.click(await button('Show the stop'));
    expect(await screen.findByRole('img', { name: 'airTrim: at rest after 2.35 s' })).toBeDefined();
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
