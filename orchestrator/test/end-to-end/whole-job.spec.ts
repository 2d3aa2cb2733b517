import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { FromLive } from '@cresthold/shared';
import type { WebSocket } from 'ws';
import { airTrimRegister } from '../harness/bench-process.js';
import { password, Station } from '../harness/station.js';
import { storySteps } from '../harness/story.js';
import { until } from '../harness/until.js';
import { seekExperiment } from './seek-experiment.js';

jest.setTimeout(90_000);

/** Where the seek begins, % of air trim; the bench knows where the best is. */
const seekStart = 22;
const seekForS = 20;

let station: Station;
let live: { socket: WebSocket; messages: FromLive[] };
const ids = { envelope: '', objective: '', experiment: '', run: '' };

beforeAll(async () => {
  station = await Station.open(['--seed', '7', '--drift', 'off', '--speed', '2']);
});

afterAll(async () => {
  live?.socket.terminate();
  await station?.close();
});

const truths = () => station.bench.log().flatMap((line) => (line.event === 'truth' ? [line] : []));
const eventsOf = (type: string) =>
  live.messages.flatMap((message) =>
    message.type === 'run-event' && message.event.body.type === type ? [message.event.body] : [],
  );

describe('the whole job over HTTP alone, on the real bench', () => {
  const step = storySteps();

  step('makes people, and no session is no way in', async () => {
    const anonymous = await fetch(`${station.server.url}/api/v1/rigs`);
    expect(anonymous.status).toBe(401);
    await station.makePeople();
  });

  step('makes the rig, whose host comes up and reads the bench', async () => {
    const { rig } = station.entry;
    const engineer = station.as('engineer');
    await station.as('reader').expect(403, 'POST', 'rigs', rig);
    const { headers } = await engineer.expect(201, 'POST', 'rigs', rig);
    expect(headers.get('location')).toBe(`/api/v1/rigs/${rig.id}`);
    const status = await station.untilPhase('idle');
    expect(status).toMatchObject({ rigId: rig.id, trip: null, envelopeVersion: null });
  });

  step('refuses to arm without an approved envelope', async () => {
    const { body } = await station.as('engineer').expect(409, 'POST', `rigs/${station.rigId}/arm`);
    expect(body.code).toMatch(/^(rig\.cannot-arm|envelope\.none-in-force)$/);
  });

  step('has the envelope drafted and submitted by one, and approved by another', async () => {
    const { content } = station.entry.envelope;
    const chief = station.as('chief');
    const wrong = { ...content, limits: content.limits.map((limit) => ({ ...limit, min: 90, max: 10 })) };
    const refused = await chief.expect(400, 'POST', `rigs/${station.rigId}/envelopes`, { content: wrong });
    expect(refused.body.errors.map((error: { field: string }) => error.field)).toContain(
      'content.limits[0].min',
    );
    const draft = await chief.expect(201, 'POST', `rigs/${station.rigId}/envelopes`, { content });
    ids.envelope = draft.body.id;
    await chief.expect(200, 'POST', `envelopes/${ids.envelope}/submit`);
    const reason = 'Limits as commissioned.';
    const early = await chief.expect(403, 'POST', `envelopes/${ids.envelope}/approve`, { reason });
    expect(early.body.code).toBe('auth.reauthentication-needed');
    await chief.reauthenticate(password);
    await station.as('officer').reauthenticate(password);
    const own = await chief.expect(403, 'POST', `envelopes/${ids.envelope}/approve`, { reason });
    expect(own.body.code).toBe('envelope.own-draft');
    await station.as('engineer').expect(403, 'POST', `envelopes/${ids.envelope}/approve`, { reason });
    await station.as('officer').expect(200, 'POST', `envelopes/${ids.envelope}/approve`, { reason });
    await until('envelope in force', async () => (await station.status()).envelopeVersion === 1);
  });

  step('makes objective and experiment, and preflight names the step at fault', async () => {
    const engineer = station.as('engineer');
    const rigId = station.rigId;
    const objective = station.entry.objectives[0]?.content;
    ids.objective = (await engineer.expect(201, 'POST', 'objectives', { rigId, content: objective })).body.id;
    const content = seekExperiment({
      objectiveId: ids.objective,
      startAt: seekStart,
      seekForS,
      surveyPoints: 5,
    });
    const clean = await engineer.expect(200, 'POST', 'experiments/preflight', { rigId, content });
    expect(clean.body.faults.filter((fault: { severity: string }) => fault.severity === 'error')).toEqual([]);

    const outside = structuredClone(content);
    const move = outside.graph.steps.find((step) => step.kind === 'move');
    if (move?.kind === 'move') move.parameters.targets = [{ channel: 'airTrim', value: 95 }];
    const bad = await engineer.expect(201, 'POST', 'experiments', { rigId, content: outside });
    await station.arm('engineer');
    const refused = await engineer.expect(400, 'POST', 'runs', { experimentId: bad.body.id });
    expect(refused.body.code).toBe('experiment.preflight-failed');
    expect(refused.body.errors[0].field).toMatch(/^steps\.move\.parameters\./);
    await engineer.expect(200, 'POST', `rigs/${rigId}/disarm`);
    await station.untilPhase('idle');
    expect((await engineer.get('runs')).items).toEqual([]);

    ids.experiment = (await engineer.expect(201, 'POST', 'experiments', { rigId, content })).body.id;
  });

  step('starts no run on a rig that is not armed, and leaves none behind', async () => {
    const { body } = await station
      .as('technician')
      .expect(409, 'POST', 'runs', { experimentId: ids.experiment });
    expect(body.code).toBe('rig.not-armed');
    expect((await station.as('technician').get('runs')).items).toEqual([]);
  });

  step('lets the technician arm and start, the reader not, and the same key start once', async () => {
    const technician = station.as('technician');
    live = await station.as('reader').live();
    live.socket.send(JSON.stringify({ type: 'subscribe', rigId: station.rigId }));
    await station.arm('technician');
    const request = { experimentId: ids.experiment };
    await station.as('reader').expect(403, 'POST', 'runs', request);
    const key = { 'idempotency-key': 'first-run' };
    const started = await technician.expect(202, 'POST', 'runs', request, key);
    ids.run = started.body.id;
    expect(started.headers.get('location')).toBe(`/api/v1/runs/${ids.run}`);
    const again = await technician.expect(202, 'POST', 'runs', request, key);
    expect(again.body.id).toBe(ids.run);
    const busy = await station.as('engineer').expect(409, 'POST', 'runs', request);
    expect(busy.body.code).toBe('rig.busy');
  });

  step('follows the run by polling and by the live connection to its verdict', async () => {
    const reader = station.as('reader');
    const ended = await until(
      'the run ends',
      async () => {
        const run = await reader.get(`runs/${ids.run}`);
        return run.endedAt === null ? null : run;
      },
      70_000,
      500,
    );
    expect(ended).toMatchObject({
      status: 'finished',
      verdict: 'pass',
      startedBy: 'technician',
      reason: expect.stringContaining('1 of 1 checks met'),
    });
    expect(ended.results).toHaveProperty(['survey.best.airTrim']);
    expect(eventsOf('survey.point-measured').length).toBeGreaterThanOrEqual(5);
    await until('the end is told', () =>
      live.messages.some((message) => message.type === 'run-changed' && message.status === 'finished'),
    );
    const sequences = live.messages.flatMap((message) =>
      message.type === 'telemetry' ? [message.telemetry.sequence] : [],
    );
    expect(sequences.length).toBeGreaterThan(100);
    expect(sequences).toEqual([...sequences].sort((a, b) => a - b));
  });

  step('has climbed to the best point that the bench itself knows', async () => {
    const query = 'columns=seek.estimate.airTrim,objective&points=5000';
    const samples = await station.as('reader').get(`runs/${ids.run}/samples?${query}`);
    expect(samples.columns).toEqual(['seek.estimate.airTrim', 'objective']);
    const estimates = samples.mean[0].filter((value: number | null) => value !== null);
    const best = truths().at(-1)?.bestTrim ?? NaN;
    const missAtStart = Math.abs(estimates[0] - best);
    const missAtEnd = Math.abs(estimates.at(-1) - best);
    console.log(`best ${best.toFixed(2)} %, start ${estimates[0]} %, end ${estimates.at(-1).toFixed(2)} %`);
    expect(missAtStart).toBeGreaterThan(4);
    expect(missAtEnd).toBeLessThan(2);
  });

  step('gives samples by span and column at a resolution, and events in order', async () => {
    const reader = station.as('reader');
    const columns = await reader.get(`runs/${ids.run}/columns`);
    expect(columns.map((column: { name: string }) => column.name)).toEqual(
      expect.arrayContaining(['airTrim', 'airTrim.applied', 'objective', 'seek.estimate.airTrim']),
    );
    const coarse = await reader.get(`runs/${ids.run}/samples?columns=airTrim.applied&points=20`);
    expect(coarse.isExact).toBe(false);
    expect(coarse.tS).toHaveLength(20);
    const fine = await reader.get(`runs/${ids.run}/samples?columns=co&fromS=2&toS=4&points=1000`);
    expect(fine.isExact).toBe(true);
    expect(Math.min(...fine.tS)).toBeGreaterThanOrEqual(2);
    expect(Math.max(...fine.tS)).toBeLessThanOrEqual(4);
    const unknown = await reader.expect(400, 'GET', `runs/${ids.run}/samples?columns=nonsense`);
    expect(unknown.body.errors[0].field).toBe('columns');

    const events = await reader.get(`runs/${ids.run}/events`);
    const bodies = events.map((event: { body: { type: string } }) => event.body.type);
    expect(bodies[0]).toBe('run.started');
    expect(bodies.at(-1)).toBe('run.ended');
    expect(events.map((event: { sequence: number }) => event.sequence)).toEqual(
      events.map((_: unknown, index: number) => index + 1),
    );
    const later = await reader.get(`runs/${ids.run}/events?afterSequence=2`);
    expect(later[0].sequence).toBe(3);
  });

  step('has sealed the file: its bytes have the hash in the row', async () => {
    const run = await until('sealed', async () => {
      const row = await station.as('reader').get(`runs/${ids.run}`);
      return row.fileSha256 === null ? null : row;
    });
    const bytes = readFileSync(join(station.dataFolder, 'runs', `${ids.run}.sqlite`));
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(run.fileSha256);
  });

  step('pauses, resumes and stops a run', async () => {
    const technician = station.as('technician');
    await station.arm('technician');
    const { body } = await technician.expect(202, 'POST', 'runs', { experimentId: ids.experiment });
    await until('running', async () => (await technician.get(`runs/${body.id}`)).status === 'running');
    await technician.expect(202, 'POST', `runs/${body.id}/pause`, { reason: 'A look at the flame.' });
    await until('paused', async () => (await technician.get(`runs/${body.id}`)).status === 'paused');
    await technician.expect(202, 'POST', `runs/${body.id}/resume`);
    await until('resumed', async () => (await technician.get(`runs/${body.id}`)).status === 'running');
    await technician.expect(202, 'POST', `runs/${body.id}/stop`, { reason: 'Seen enough.' });
    const ended = await until('stopped', async () => {
      const run = await technician.get(`runs/${body.id}`);
      return run.endedAt === null ? null : run;
    });
    expect(ended).toMatchObject({ status: 'stopped', verdict: 'inconclusive' });
    const late = await technician.expect(409, 'POST', `runs/${body.id}/stop`, { reason: 'Again.' });
    expect(late.body.code).toBe('run.ended');
  });

  step('stops in an emergency for anybody, latches, and is reset by the officer alone', async () => {
    const engineer = station.as('engineer');
    const rigPath = `rigs/${station.rigId}`;
    await station.arm('engineer');
    const { body: run } = await engineer.expect(202, 'POST', 'runs', { experimentId: ids.experiment });
    await until('running', async () => (await engineer.get(`runs/${run.id}`)).status === 'running');
    const stopped = await station
      .as('reader')
      .expect(200, 'POST', `${rigPath}/emergency-stop`, { reason: 'Smoke.' });
    expect(stopped.body).toMatchObject({
      phase: 'tripped',
      trip: { cause: 'emergency-stop', by: 'reader' },
    });
    const ended = await until('tripped', async () => {
      const row = await engineer.get(`runs/${run.id}`);
      return row.endedAt === null ? null : row;
    });
    expect(ended).toMatchObject({ status: 'tripped', verdict: 'inconclusive' });
    const move = { channel: 'airTrim', value: 40, hold: null };
    expect((await engineer.expect(409, 'POST', `${rigPath}/moves`, move)).body.code).toBe('rig.tripped');
    const reason = 'Smoke came from the toaster.';
    await engineer.expect(403, 'POST', `${rigPath}/reset`, { reason });
    await station.as('officer').reauthenticate(password);
    await station.as('officer').expect(400, 'POST', `${rigPath}/reset`, {});
    const reset = await until('reset', async () => {
      const answer = await station.as('officer').call('POST', `${rigPath}/reset`, { reason });
      return answer.status === 200 ? answer.body : null;
    });
    expect(reset).toMatchObject({ phase: 'idle', trip: null });
    const { items } = await station.as('reader').get(`${rigPath}/trips`);
    expect(items[0]).toMatchObject({
      trip: { cause: 'emergency-stop' },
      resetBy: 'officer',
      resetReason: reason,
    });
    const told = await station.as('reader').get(`${rigPath}/trips/${items[0].id}`);
    expect(told.trajectory.isAtRest).toBe(true);
    expect(told.timesToRest.every(({ timeS }: { timeS: number | null }) => timeS !== null)).toBe(true);
  });

  step('moves by hand inside the envelope only, and not while locked out', async () => {
    const engineer = station.as('engineer');
    const rigPath = `rigs/${station.rigId}`;
    await station.arm('engineer');
    const unknown = await engineer.expect(400, 'POST', `${rigPath}/moves`, {
      channel: 'nothing',
      value: 1,
      hold: null,
    });
    expect(unknown.body.code).toBe('channel.not-found');
    await engineer.expect(200, 'POST', `${rigPath}/moves`, {
      channel: 'airTrim',
      value: 60,
      hold: null,
    });
    await engineer.expect(200, 'POST', `${rigPath}/disarm`);
    await station.untilPhase('idle');
    const hold = { reason: 'Hands in the burner.' };
    await station.as('reader').expect(403, 'POST', `${rigPath}/lockouts`, hold);
    const { body: lockout } = await station.as('officer').expect(201, 'POST', `${rigPath}/lockouts`, hold);
    expect(await station.status()).toMatchObject({ isLockedOut: true });
    await engineer.expect(409, 'POST', `${rigPath}/arm`);
    const lift = `${rigPath}/lockouts/${lockout.id}/lift`;
    await engineer.expect(403, 'POST', lift, { reason: 'In a hurry.' });
    const left = await station.as('officer').expect(200, 'POST', lift, { reason: 'The work is done.' });
    expect(left.body).toEqual([]);
  });

  step('is in good health', async () => {
    const health = await station.as('reader').get('health');
    expect(health.status).toBe('ok');
    expect(health.info).toHaveProperty('database');
    expect(health.info).toHaveProperty([`rig-host:${station.rigId}`]);
  });

  step('never wrote outside the envelope, by the log of the bench', () => {
    const limit = station.entry.envelope.content.limits.find(({ channel }) => channel === 'airTrim');
    const writes = station.bench
      .log()
      .flatMap((line) =>
        line.event === 'write' && line.register === airTrimRegister ? [line.engineering] : [],
      );
    expect(writes.length).toBeGreaterThan(100);
    expect(Math.min(...writes)).toBeGreaterThanOrEqual(limit?.min ?? NaN);
    expect(Math.max(...writes)).toBeLessThanOrEqual(limit?.max ?? NaN);
  });
});
