import { fireEvent, screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { demoEnvelope, demoRigDocument, sessionOf } from '../../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../../testing/fake-server.js';
import { renderConsole } from '../../../testing/render-console.js';
import { decodePoints } from './decode-points.js';

const run = {
  id: 'run-1',
  rigId: 'burner-1',
  experimentId: 'exp-1',
  experimentVersion: 2,
  experimentTitle: 'Best air trim',
  envelopeVersion: 3,
  status: 'finished',
  verdict: 'pass',
  reason: null,
  startedAt: '2026-03-01T10:00:00.000Z',
  endedAt: '2026-03-01T10:00:12.000Z',
  startedBy: 'technician',
  scans: 200,
  results: {},
  warnings: [],
  fileSha256: null,
};
const graph = {
  steps: [{ kind: 'start', id: 'start', title: '', position: { x: 0, y: 0 }, parameters: {} }],
  edges: [],
};
const version = {
  ...{ experimentId: 'exp-1', version: 2, basedOn: 1, note: '' },
  ...{ createdAt: '2026-03-01T09:00:00.000Z', createdBy: 'test-engineer' },
  content: { title: 'Best air trim', objectiveId: null, graph },
};
const channel = {
  id: 'flame',
  title: 'Flame image',
  unit: 'mV',
  display: { min: 0, max: 10, decimals: 1 },
  axis: { title: 'Height', unit: 'mm', from: 0, step: 2 },
};
/** Little-endian Float32 in base64, by the standard library. */
const base64Of = (points: number[]) => {
  const bytes = new DataView(new ArrayBuffer(4 * points.length));
  points.forEach((point, i) => bytes.setFloat32(4 * i, point, true));
  return btoa(String.fromCharCode(...new Uint8Array(bytes.buffer)));
};
const trace = (scan: number) => ({ scan, tS: scan / 20, atMs: 0, points: base64Of([1, scan / 100, 0.5]) });

function openRun(more: Record<string, Handler> = {}) {
  const seen = serve({
    'GET /auth/session': () => json(sessionOf('reader')),
    'GET /rigs': list(demoRigDocument),
    'GET /rigs/burner-1': () => json(demoRigDocument),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /runs/run-1': () => json(run),
    'GET /runs/run-1/columns': () => json([]),
    'GET /runs/run-1/samples': () => json({ columns: [], isExact: true, tS: [], mean: [], min: [], max: [] }),
    'GET /runs/run-1/events': () => json([]),
    'GET /experiments/exp-1/versions/2': () => json(version),
    'GET /runs/run-1/trace-channels': () => json([channel]),
    'GET /runs/run-1/traces': list(trace(1), trace(101)),
    'GET /runs/run-1/traces/200': () => json(scanOf(200)),
    'GET /runs/run-1/traces/199': () => json(scanOf(199)),
    'GET /runs/run-1/traces/1': () => json({ ...scanOf(1), traces: [] }),
    ...more,
  });
  return { ...renderConsole('/runs/run-1'), seen };
}
const scanOf = (scan: number) => {
  const { points, ...at } = trace(scan);
  return { ...at, traces: [{ channel: 'flame', points }] };
};
const slider = () => screen.findByRole('slider', { name: 'Scan of the run' });

describe('the traces of a finished run', () => {
  it('begin with the last scan, in a drawing and in words', async () => {
    openRun();
    expect(await screen.findByRole('heading', { name: 'Flame image', level: 2 })).toBeDefined();
    const words = '3 points from 0 to 4 mm; least 0.5 mV; greatest 2.0 mV at 2 mm.';
    expect(await screen.findByText(words)).toBeDefined();
    expect(screen.getByRole('img', { name: `Flame image over Height. ${words}` })).toBeDefined();
    expect(await screen.findByRole('img', { name: /2 traces over the run/ })).toBeDefined();
  });

  it('go through the run by keyboard, and say which scan is shown', async () => {
    openRun();
    const thumb = await slider();
    expect(thumb.getAttribute('aria-valuetext')).toContain('scan 200 of 200');
    fireEvent.keyDown(thumb, { key: 'ArrowLeft' });
    expect(await screen.findByText('scan 199 of 200, 9.95 s')).toBeDefined();
    fireEvent.keyDown(thumb, { key: 'Home' });
    expect(await screen.findByText('The trace was not good in this scan.')).toBeDefined();
  });

  it('say why they cannot be loaded, and can be tried again', async () => {
    openRun({
      'GET /runs/run-1/traces/200': () => problem(404, 'run.no-samples', 'The run has no scan 200.'),
    });
    expect((await screen.findByRole('alert')).textContent).toContain('The run has no scan 200.');
  });

  it('are left out where the run recorded none', async () => {
    openRun({ 'GET /runs/run-1/trace-channels': () => json([]) });
    await screen.findByRole('heading', { name: 'Best air trim', level: 1 });
    expect(screen.queryByRole('slider')).toBeNull();
  });
});

it('decodes points as its example says', () => {
  expect([...decodePoints('AACAPwAAAMA=')]).toEqual([1, -2]);
  expect([...decodePoints('')]).toEqual([]);
});
