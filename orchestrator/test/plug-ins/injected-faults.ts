import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { RigStatus } from '@cresthold/shared';
import { ApiClient, type Body } from '../harness/api-client.js';
import { password } from '../harness/station.js';
import { until } from '../harness/until.js';

/** What the checks of injected faults work with: a server with a bench and a machine on the same device. */
export interface FaultSetting {
  url: string;
  dataFolder: string;
  administrator: ApiClient;
}

const path = (rigId: string, connection = 'bath') => `rigs/${rigId}/connections/${connection}/fault`;

/** Defines the tests of faults on the connections of the rigs `bench` and `machine`. */
export function describeInjectedFaults(setting: () => FaultSetting): void {
  let engineer: ApiClient;
  const status = (): Promise<RigStatus> => engineer.get('rigs/bench/status') as Promise<RigStatus>;
  const put = (fault: unknown, rigId = 'bench') => engineer.call('PUT', path(rigId), { fault });
  const connectionOf = ({ connections }: Body): RigStatus['connections'][number] => connections[0];

  beforeAll(async () => {
    const { administrator, url } = setting();
    for (const account of ['engineer', 'technician']) {
      const roles = [account === 'engineer' ? 'test-engineer' : account];
      await administrator.expect(201, 'POST', 'users', { account, title: account, roles, password });
    }
    engineer = await ApiClient.signIn(url, 'engineer', password);
    await until('the bench is connected', async () => connectionOf(await status())?.isConnected);
  }, 60_000);

  it('is refused for a rig that is no bench', async () => {
    const answer = await put({ kind: 'corrupt' }, 'machine');
    expect([answer.status, answer.body.code]).toEqual([409, 'rig.not-a-bench']);
    expect(connectionOf(await engineer.get('rigs/machine/status')).injectedFault).toBeNull();
  });

  it('is for test engineers only', async () => {
    const technician = await ApiClient.signIn(setting().url, 'technician', password);
    const answer = await technician.call('PUT', path('bench'), { fault: null });
    expect(answer.status).toBe(403);
  });

  it.each([
    [404, 'connection.not-found', path('bench', 'ghost'), { kind: 'corrupt' }],
    [400, 'channel.not-found', path('bench'), { kind: 'corrupt', channels: ['ghost'] }],
    [400, 'request.invalid', path('bench'), { kind: 'corrupt', probability: 2 }],
    [400, 'request.invalid', path('bench'), { kind: 'delay' }],
    [400, 'request.invalid', path('bench'), { kind: 'corrupt', fromS: 5, untilS: 4 }],
    [400, 'request.invalid', path('bench'), { kind: 'gremlins' }],
  ])('is refused with %i %s for %s %j', async (httpStatus, code, where, fault) => {
    const answer = await engineer.call('PUT', where, { fault });
    expect([answer.status, answer.body.code]).toEqual([httpStatus, code]);
  });

  it('hits the chosen channel, is seen by everybody, and goes when it is cleared', async () => {
    const fault = { kind: 'corrupt', channels: ['temp'] };
    const { status: httpStatus, body } = await put(fault);
    expect(httpStatus).toBe(200);
    expect(connectionOf(body).injectedFault).toMatchObject({
      fault: { ...fault, probability: 1, seed: 1, fromS: 0, untilS: null },
      by: 'engineer',
      isActive: true,
    });
    const { channelFaults } = await until('the fault shows', async () => {
      const now = await status();
      return now.channelFaults.length > 0 && now;
    });
    expect(channelFaults).toEqual([
      {
        channel: 'temp',
        code: 'adapter.corrupt',
        message: expect.stringContaining('Injected fault') as string,
      },
    ]);
    expect(connectionOf((await put(null)).body).injectedFault).toBeNull();
    await until('the channel is back', async () => (await status()).channelFaults.length === 0);
    const audit = await setting().administrator.get('audit?rigId=bench');
    const acts = (audit.items as Body[]).map(({ action, account, subject }) => [action, account, subject]);
    expect(acts).toContainEqual(['rig.fault-injected', 'engineer', 'bath']);
    expect(acts).toContainEqual(['rig.fault-cleared', 'engineer', 'bath']);
  }, 30_000);

  it('ends with the rig host', async () => {
    await put({ kind: 'disconnect', canReconnect: false });
    await until('the connection is down', async () => connectionOf(await status())?.isConnected === false);
    const pid = Number(/\d+/.exec(readFileSync(join(setting().dataFolder, 'rigs/bench.pid'), 'utf8'))?.[0]);
    process.kill(pid, 'SIGKILL');
    const after = await until('a new host has connected', async () => {
      const connection = connectionOf(await status());
      return connection?.isConnected && connection;
    });
    expect(after.injectedFault).toBeNull();
  }, 60_000);
}
