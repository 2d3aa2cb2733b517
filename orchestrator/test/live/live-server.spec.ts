import { createServer, type Server } from 'node:http';
import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import type { HttpAdapterHost } from '@nestjs/core';
import type { RigStatus } from '@cresthold/shared';
import { WebSocket } from 'ws';
import type { LiveSession, SessionsService } from '../../src/auth/sessions.service.js';
import { LiveHub } from '../../src/live/live-hub.js';
import { LiveServer } from '../../src/live/live.server.js';
import { statusWithoutHost } from '../../src/rig-hosts/offline-status.js';
import type { RigHostsService } from '../../src/rig-hosts/rig-hosts.service.js';
import type { RigLimit } from '../../src/users/dto/user.dto.js';
import { until } from '../harness/until.js';

const good = 'cresthold_session=good';
const careEveryMs = 50;

let http: Server;
let live: LiveServer;
let hub: LiveHub;
let isSessionGood: boolean;
let rigLimits: RigLimit[];
let port: number;

const session = (): LiveSession | null =>
  isSessionGood
    ? {
        user: { account: 'reader', title: 'Reader', roles: ['reader'], rigLimits, sessionId: 'one' },
        isIdle: false,
        isElevated: false,
      }
    : null;

beforeEach(async () => {
  http = createServer();
  http.listen(0, '127.0.0.1');
  await once(http, 'listening');
  port = (http.address() as AddressInfo).port;
  hub = new LiveHub();
  isSessionGood = true;
  rigLimits = [];
  const sessions = {
    ofCookieHeader: (cookie: string | undefined) => Promise.resolve(cookie === good ? session() : null),
    ofId: () => Promise.resolve(session()),
  };
  const statuses: RigStatus[] = [statusWithoutHost('rig-1', null, false, 'The rig host is starting.')];
  live = new LiveServer(
    { httpAdapter: { getHttpServer: () => http } } as unknown as HttpAdapterHost,
    sessions as unknown as SessionsService,
    { statuses: () => Promise.resolve(statuses) } as unknown as RigHostsService,
    hub,
    careEveryMs,
  );
  live.onApplicationBootstrap();
});

afterEach(() => {
  live.onModuleDestroy();
  http.close();
});

/** The status of a refused handshake, or the first message of an opened connection. */
async function connect(path: string, headers: Record<string, string>) {
  const socket = new WebSocket(`ws://127.0.0.1:${port}${path}`, { headers });
  const messages: string[] = [];
  socket.on('message', (data) => messages.push((data as Buffer).toString()));
  const refused = once(socket, 'unexpected-response').then(
    ([, response]) => (response as { statusCode: number }).statusCode,
  );
  socket.on('error', () => undefined);
  const status = await Promise.race([refused, once(socket, 'open').then(() => 101)]);
  return { socket, messages, status };
}

describe('the live connection', () => {
  it.each([
    ['without a session', '/api/v1/live', {}, 401],
    ['with a bad session', '/api/v1/live', { cookie: 'cresthold_session=bad' }, 401],
    ['from a page of another origin', '/api/v1/live', { cookie: good, origin: 'http://elsewhere' }, 401],
    ['at another path', '/api/v1/other', { cookie: good }, 404],
  ])('is refused %s', async (_how, path, headers, status) => {
    expect((await connect(path, headers)).status).toBe(status);
    expect(hub.all()).toEqual([]);
  });

  it('begins with the status of every rig, for a page of our own and for a script', async () => {
    const ofOurPage = { cookie: good, origin: `http://127.0.0.1:${port}` };
    for (const headers of [{ cookie: good }, ofOurPage]) {
      const { socket, messages, status } = await connect('/api/v1/live', headers);
      expect(status).toBe(101);
      await until('the first message', () => messages.length > 0);
      expect(JSON.parse(messages[0] ?? '')).toMatchObject({
        type: 'rig-status',
        status: { rigId: 'rig-1' },
      });
      socket.terminate();
    }
    await until('both are forgotten', () => hub.all().length === 0);
  });

  it('tells of no rig that no role of the session reaches', async () => {
    rigLimits = [{ role: 'reader', rigs: ['rig-2'] }];
    const { socket, messages } = await connect('/api/v1/live', { cookie: good });
    socket.send(JSON.stringify({ type: 'subscribe', rigId: 'rig-1' }));
    await until('an answer', () => messages.length > 0);
    expect(messages.map((text) => JSON.parse(text).type)).toEqual(['error']);
    hub.toAll('rig-1', { type: 'error', message: 'of rig-1' });
    hub.toSubscribers('rig-1', { type: 'error', message: 'of rig-1' });
    hub.toAll('rig-2', { type: 'error', message: 'of rig-2' });
    await until('the second', () => messages.length > 1);
    expect(messages.slice(1).map((text) => JSON.parse(text).message)).toEqual(['of rig-2']);
    socket.terminate();
  });

  it('ends when the session ends', async () => {
    const { socket } = await connect('/api/v1/live', { cookie: good });
    const closed = once(socket, 'close') as Promise<[number]>;
    isSessionGood = false;
    expect((await closed)[0]).toBe(4401);
  });
});
