import { fireEvent, screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { Role, RunStatus } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const run = {
  id: 'run-1',
  rigId: 'burner-1',
  experimentId: 'exp-1',
  experimentVersion: 2,
  experimentTitle: 'Best air trim',
  envelopeVersion: 3,
  status: 'running',
  verdict: null,
  reason: null,
  startedAt: '2026-03-01T10:00:00.000Z',
  endedAt: null,
  startedBy: 'technician',
  scans: 200,
  results: {},
  warnings: [],
  fileSha256: null,
};

const version = {
  experimentId: 'exp-1',
  version: 2,
  basedOn: 1,
  note: '',
  createdAt: '2026-03-01T09:00:00.000Z',
  createdBy: 'test-engineer',
  content: {
    title: 'Best air trim',
    objectiveId: null,
    graph: {
      steps: [{ kind: 'start', id: 'start', title: '', position: { x: 0, y: 0 }, parameters: {} }],
      edges: [],
    },
  },
};

const ended = {
  sequence: 1,
  tS: 12.5,
  at: '2026-03-01T10:00:12.500Z',
  body: { type: 'rig.tripped', cause: 'interlock:co-high', message: 'Far too little air.' },
};

function openRun(role: Role, status: RunStatus, more: Record<string, Handler> = {}) {
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(demoRigDocument),
    'GET /rigs/burner-1': () => json(demoRigDocument),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /runs/run-1': () => json({ ...run, status, reason: 'By the test.' }),
    'GET /runs/run-1/columns': () => json([]),
    'GET /runs/run-1/trace-channels': () => json([]),
    'GET /runs/run-1/samples': () => json({ columns: [], isExact: true, tS: [], mean: [], min: [], max: [] }),
    'GET /runs/run-1/events': () => json([ended]),
    'GET /experiments/exp-1/versions/2': () => json(version),
    ...more,
  });
  return { ...renderConsole('/runs/run-1'), seen };
}

describe('the page of a run', () => {
  it('names experiment, version, envelope and person, and says what happened in words', async () => {
    openRun('reader', 'tripped');
    expect(await screen.findByRole('heading', { name: 'Best air trim', level: 1 })).toBeDefined();
    expect(screen.getByText(/under envelope version 3, started .* by technician/)).toBeDefined();
    expect(await screen.findByText('Tripped by interlock:co-high: Far too little air.')).toBeDefined();
    expect(screen.getByText('The rig tripped')).toBeDefined();
  });

  it('offers no steering once the run has ended', async () => {
    openRun('technician', 'finished');
    await screen.findByRole('heading', { name: 'Best air trim', level: 1 });
    expect(screen.queryByRole('button', { name: 'Stop run' })).toBeNull();
  });

  it('does not let a reader steer, and says why', async () => {
    openRun('reader', 'running');
    const stop = await screen.findByRole<HTMLButtonElement>('button', { name: 'Stop run' });
    expect(stop.disabled).toBe(true);
    expect(screen.getAllByText('Needs the role test engineer or technician.').length).toBeGreaterThan(0);
  });

  it('stops with a reason, and without one asks for it', async () => {
    let status = 'running';
    const { seen } = openRun('technician', 'running', {
      'GET /runs/run-1': () => json({ ...run, status }),
      'POST /runs/run-1/stop': () => {
        status = 'stopping';
        return json({ ...run, status }, 202);
      },
    });
    fireEvent.click(await screen.findByRole('button', { name: 'Stop run' }));
    const confirm = screen.getAllByRole('button', { name: 'Stop run' }).at(-1) as HTMLElement;
    fireEvent.click(confirm);
    expect(screen.getByText('Give a reason: it goes into the record.')).toBeDefined();
    fireEvent.change(screen.getByLabelText('Reason'), { target: { value: 'Seen enough.' } });
    fireEvent.click(confirm);
    expect((await screen.findAllByText('The run is stopping.')).length).toBeGreaterThan(0);
    expect(seen.find((request) => request.method === 'POST')?.body).toEqual({ reason: 'Seen enough.' });
  });

  it('says so where there is no such run', async () => {
    openRun('reader', 'running', {
      'GET /runs/run-1': () => problem(404, 'run.not-found', 'No such run.'),
    });
    expect(await screen.findByText('The run could not be loaded')).toBeDefined();
    expect(screen.getByText('No such run.')).toBeDefined();
  });
});
