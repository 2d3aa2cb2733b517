import type { StopTrajectory, Trip } from '@cresthold/shared';
import { TripHistory } from '../../src/trips/trip-history.js';
import type { TestServer } from '../server/create-test-server.js';
import { createScriptedServer, makeRig, rigId } from '../rig-hosts/scripted-server.js';

const rigPath = `/api/v1/rigs/${rigId}`;
let server: TestServer;

const trajectory: StopTrajectory = {
  columns: ['damper', 'damper.applied'],
  rows: [
    { tS: -0.1, values: [40, 40] },
    { tS: 0, values: [40, 30] },
  ],
  timesToRest: [{ channel: 'damper', timeS: 4 }],
  isAtRest: true,
};
const trip = (at: string): Trip => ({ cause: 'overrun', message: 'Late.', at, by: null, later: [] });

beforeEach(async () => {
  server = await createScriptedServer();
  await makeRig(server);
});
afterEach(() => server.close());

describe('the trips of a rig', () => {
  it('are kept with who pressed and who reset, newest first, each once', async () => {
    const reader = await server.as('reader', 'reader');
    const officer = await server.as('officer', 'safety-officer');
    for (const reason of ['Smoke.', 'A noise.']) {
      await reader.post(`${rigPath}/emergency-stop`).send({ reason }).expect(200);
      await reader.post(`${rigPath}/emergency-stop`).send({ reason: 'Again.' }).expect(200);
      await officer
        .post(`${rigPath}/reset`)
        .send({ reason: `Gone: ${reason}` })
        .expect(200);
    }
    const { body } = await reader.get(`${rigPath}/trips`).expect(200);
    expect(body.items).toHaveLength(2);
    expect(body.items[1]).toMatchObject({
      trip: { cause: 'emergency-stop', by: 'reader' },
      resetBy: 'officer',
      resetReason: 'Gone: Smoke.',
      timesToRest: null,
    });
    const { body: page } = await reader.get(`${rigPath}/trips?limit=1`).expect(200);
    const rest = `${rigPath}/trips?limit=1&cursor=${page.nextCursor}`;
    expect((await reader.get(rest).expect(200)).body.items).toEqual([body.items[1]]);
  });

  it('carry the trajectory of their stop', async () => {
    const history = server.app.get(TripHistory, { strict: false });
    const at = '2026-01-01T00:00:00.000Z';
    await history.follow(rigId, trip(at));
    await history.keepTrajectory(rigId, { cause: 'overrun', at }, trajectory);
    const reader = await server.as('reader', 'reader');
    const { body } = await reader.get(`${rigPath}/trips`).expect(200);
    expect(body.items).toMatchObject([{ resetAt: null, timesToRest: [{ channel: 'damper', timeS: 4 }] }]);
    const { body: whole } = await reader.get(`${rigPath}/trips/${body.items[0].id}`).expect(200);
    expect(whole.trajectory).toEqual(trajectory);
  });

  it('keep their trajectories for the last hundred only, and everything else for ever', async () => {
    const history = server.app.get(TripHistory, { strict: false });
    for (let i = 0; i < 102; i += 1) {
      const at = new Date(Date.UTC(2026, 0, 1, 0, i)).toISOString();
      await history.follow(rigId, trip(at));
      await history.keepTrajectory(rigId, { cause: 'overrun', at }, trajectory);
      await history.close(rigId, trip(at), { by: 'officer', reason: 'Looked at.' });
    }
    const rows = await history.list(rigId, 200, null);
    expect(rows).toHaveLength(102);
    const kept = await Promise.all(rows.map(({ id }) => history.get(rigId, id)));
    expect(kept.map((row) => row.trajectory !== null).lastIndexOf(true)).toBe(99);
    expect(rows.every(({ timesToRest }) => timesToRest !== null)).toBe(true);
  });

  it('are of one rig: another knows nothing of them', async () => {
    const reader = await server.as('reader', 'reader');
    await reader.get('/api/v1/rigs/nowhere/trips').expect(404);
    const answer = await reader.get(`${rigPath}/trips/none`).expect(404);
    expect(answer.body.code).toBe('trip.not-found');
  });
});
