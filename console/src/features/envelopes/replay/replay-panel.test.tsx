import { fireEvent, screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { ReplayReport } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, sessionOf } from '../../../testing/documents.js';
import { json, list, serve } from '../../../testing/fake-server.js';
import { renderConsole } from '../../../testing/render-console.js';

const report: ReplayReport = {
  scans: 1200,
  untilTS: 60,
  firstHalt: { cause: 'interlock:co-high', action: 'trip', tS: 12.5 },
  interlocks: [
    {
      ...{ id: 'co-high', title: 'Carbon monoxide high', action: 'trip', whyNotJudged: null, acts: 2 },
      episodes: [{ fromTS: 12.5, durationS: 3, isOpen: false }],
      ...{ totalS: 5, isTrueAtStart: false, nearMisses: 1, longestNearMissS: 1.5, badScans: 0 },
      ...{ leastMargin: { value: -20, atTS: 13 }, marginChannel: 'co' },
    },
  ],
  actuators: [
    {
      ...{ channel: 'airTrim', isLimited: true, requests: 900, appliedOutside: 0, readBackTrips: 0 },
      range: { clips: 0, leastMargin: { value: 4, atTS: 30 } },
      slew: { clips: 7, leastMargin: { value: -0.5, atTS: 31 } },
      dither: { clips: 0, leastMargin: null },
      readBackLeastMargin: null,
    },
  ],
  staleness: [],
  emergencyStops: [],
  overruns: { mostInARow: 1, limit: 20, isTrip: false },
  hints: [{ kind: 'nuisance', text: 'The run ended well.' }],
};
const head = { title: 'Seek the best air', startedAt: '2026-03-01T08:00:00.000Z', envelopeVersion: 2 };
const answer = {
  runs: [
    { ...head, runId: 'run-7', status: 'finished', report, note: null },
    { ...head, runId: 'run-6', title: 'Survey', status: 'stopped', report: null, note: 'Not replayed.' },
  ],
  scans: 1200,
  scansMax: 1_000_000,
};

function open() {
  const seen = serve({
    'GET /auth/session': () => json(sessionOf('safety-officer')),
    'GET /rigs': list(demoRigDocument),
    'GET /rigs/burner-1': () => json(demoRigDocument),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /runs': list(
      {
        id: 'run-7',
        experimentTitle: 'Seek',
        startedAt: head.startedAt,
        status: 'finished',
        endedAt: head.startedAt,
      },
      { id: 'run-8', experimentTitle: 'Now', startedAt: head.startedAt, status: 'running', endedAt: null },
    ),
    'POST /rigs/burner-1/envelopes/replay': () => json(answer),
  });
  renderConsole('/rigs/burner-1/envelope');
  return seen;
}
const sentBody = (seen: ReturnType<typeof open>) => seen.find(({ path }) => path.endsWith('/replay'))?.body;

it('replays the version on the last five runs and shows what would have acted, with the moment in the run', async () => {
  const seen = open();
  fireEvent.click(await screen.findByRole('button', { name: 'Replay on the last 5 runs' }));
  const run = await screen.findByRole('article', { name: /Seek the best air/ });
  expect(sentBody(seen)).toEqual({ content: demoEnvelope.content, lastRuns: 5 });
  expect(within(run).getByText('Nuisance trip')).toBeDefined();
  expect(run.textContent).toContain('interlock:co-high (trip) at 12.5 s');
  expect(run.textContent).toContain(
    'trip 2 times, 5 s in all; unsafe once for less than its delay, 1.5 s at most',
  );
  expect(run.textContent).toContain('clipped in 7 scans');
  expect(run.textContent).toContain('−0.5 %/s');
  expect(run.textContent).not.toContain('Air trim, range');
  expect(within(run).getAllByRole('link', { name: '12.5 s' })[0]?.getAttribute('href')).toBe(
    '/runs/run-7?atS=12.5',
  );
  expect(screen.getByText('Not replayed.')).toBeDefined();
});

it('shows the margins of what would not have acted too, where it is asked', async () => {
  open();
  fireEvent.click(await screen.findByRole('button', { name: 'Replay on the last 5 runs' }));
  fireEvent.click(await screen.findByRole('button', { name: 'All 5 with their margins' }));
  const run = screen.getByRole('article', { name: /Seek the best air/ });
  expect(run.textContent).toContain('Air trim, range');
  expect(run.textContent).toContain('4 %');
});

it('replays on chosen runs; one that goes on is not offered', async () => {
  const seen = open();
  fireEvent.click(await screen.findByRole('button', { name: 'Choose runs …' }));
  fireEvent.click(await screen.findByLabelText(/^Seek,/));
  expect(screen.queryByLabelText(/^Now,/)).toBeNull();
  fireEvent.click(screen.getByRole('button', { name: 'Replay on the chosen run' }));
  await expect.poll(() => sentBody(seen)).toMatchObject({ runIds: ['run-7'] });
});
