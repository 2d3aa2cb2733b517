import { once } from 'node:events';
import { createServer, type AddressInfo } from 'node:net';
import { existsSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import Database from 'better-sqlite3';
import { closeInterrupted } from '../../src/recordings/run-file/index.js';
import { expectContinuous, expectRestRecorded, HostHarness, storedRun } from './host-harness.js';
import { ModbusDevice } from './modbus-device.js';
import { temporaryFolder } from './run-file-fixture.js';
import { testEnvelope, testRig } from './test-rig.js';

jest.setTimeout(90_000);

describe('rig host, by every way to die', () => {
  const folder = temporaryFolder();
  let device: ModbusDevice;
  let host: HostHarness;
  beforeEach(async () => {
    device = await ModbusDevice.start();
  });
  afterEach(async () => {
    await host.end();
    await device.cut();
    expect(host.unknown).toEqual([]);
  });
  afterAll(folder.remove);

  async function runAtFour(name: string, execArgv: string[] = []): Promise<string> {
    const file = join(folder.path, `${name}.sqlite`);
    host = await HostHarness.configured(testRig(device.port), testEnvelope(), execArgv);
    await host.startRun(name, file, 600);
    await host.until(() => device.airTrim === 4, 'the air trim at 4');
    return file;
  }

  it('the server goes: it stops the rig, closes the file and ends by itself', async () => {
    const file = await runAtFour('server-gone');
    host.child.disconnect();
    expect(await host.exited).toEqual({ code: 0, signal: null });
    expect(device.airTrim).toBe(0);
    expect(existsSync(`${file}-wal`)).toBe(false);
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.end).toMatchObject({ status: 'tripped', scans: run.ks.length });
    expect(run.eventTypes).toContain('rig.tripped');
    expectRestRecorded(run);
  });

  it('SIGTERM: it stops the run in order, comes to rest, and ends by itself', async () => {
    const file = await runAtFour('sigterm');
    host.child.kill('SIGTERM');
    expect(await host.exited).toEqual({ code: 0, signal: null });
    expect(device.airTrim).toBe(0);
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.end?.status).toBe('stopped');
    expect(host.last('run-ended')?.status).toBe('stopped');
  });

  it('the order to shut down is the same, and SIGINT alone is none', async () => {
    const file = await runAtFour('shut-down');
    host.child.kill('SIGINT');
    const scansBefore = host.status?.scan.count ?? 0;
    await host.until(() => (host.status?.scan.count ?? 0) > scansBefore, 'it goes on');
    expect(device.airTrim).toBe(4);
    await host.ask({ type: 'shut-down' });
    expect(await host.exited).toEqual({ code: 0, signal: null });
    expect(device.airTrim).toBe(0);
    expect(storedRun(file).end?.status).toBe('stopped');
  });

  it('SIGKILL: the file opens, lacks 100 ms at most, and its end can be marked', async () => {
    const file = await runAtFour('sigkill');
    await delay(500);
    const before = host.last('telemetry')?.telemetry.rows.at(-1)?.tS ?? NaN;
    host.child.kill('SIGKILL');
    await host.exited;
    const seen = Math.max(before, host.last('telemetry')?.telemetry.rows.at(-1)?.tS ?? NaN);
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.end).toBeNull();
    expect(run.tS.at(-1)).toBeGreaterThan(seen - 0.1);
    const marked = await closeInterrupted(file, 'The rig host was killed.');
    expect(marked).toMatchObject({ status: 'interrupted', scans: run.ks.length });
    expect(storedRun(file).eventTypes.at(-1)).toBe('run.ended');
  });

  it('the server hangs with the channel open: it trips and stops the rig, and stays', async () => {
    const file = await runAtFour('server-silent');
    host.fallSilent();
    const tripped = await host.untilStatus((s) => s.phase === 'tripped', 'tripped');
    expect(tripped.trip?.cause).toBe('server-silent');
    await host.until(() => device.airTrim === 0, 'the air trim at rest');
    await host.until(() => host.last('run-ended'), 'the end of the run');
    const run = storedRun(file);
    expect(run.end?.status).toBe('tripped');
    expectRestRecorded(run);
    expect(host.of('run-status').map(({ status }) => status)).toEqual(['running', 'stopping']);
    expect(host.child.exitCode).toBeNull();
  });

  it.each([
    ['an exception that nothing catches', 'planted-fault.cjs'],
    ['an exception in the scan itself', 'planted-scan-fault.cjs'],
  ])('%s: it trips, stops the rig, and ends with a code of its own', async (_, fault) => {
    const file = await runAtFour(fault, ['--require', resolve(__dirname, fault)]);
    host.child.kill('SIGUSR2');
    expect(await host.exited).toEqual({ code: 70, signal: null });
    expect(device.airTrim).toBe(0);
    expect(host.of('log').some((m) => m.text.includes('planted by a test'))).toBe(true);
    expect(host.of('status').at(-1)?.status.trip?.cause).toBe('host-fault');
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.end?.status).toBe('tripped');
    expectRestRecorded(run);
  });

  it('the disk does not take samples: it trips, and has them all once the disk does again', async () => {
    const file = await runAtFour('disk');
    const other = new Database(file);
    other.exec('BEGIN IMMEDIATE');
    const tripped = await host.untilStatus((s) => s.phase === 'tripped', 'tripped');
    expect(tripped.trip).toMatchObject({ cause: 'recorder', message: expect.stringContaining('locked') });
    other.exec('ROLLBACK');
    other.close();
    const ended = await host.until(() => host.last('run-ended'), 'the end of the run');
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.ks).toHaveLength(ended.scans);
    expect(run.end?.status).toBe('tripped');
    expectRestRecorded(run);
  });

  it('the wire is cut: it trips, records that, and stops the rig once the wire is back', async () => {
    const file = await runAtFour('wire-cut');
    const { port } = device;
    await device.cut();
    const tripped = await host.untilStatus((s) => s.phase === 'tripped', 'tripped');
    expect(tripped.trip?.cause).toBe('connection:main');
    const ended = await host.until(() => host.last('run-ended'), 'the end of the run');
    expect(ended.status).toBe('tripped');
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.eventTypes).toContain('connection.lost');
    expect(run.oxygen.at(-1)).toBeNull();
    const left = [...device.words];
    device = await ModbusDevice.start(port);
    device.words.set(left);
    expect(device.airTrim).toBe(4);
    await host.until(() => device.airTrim === 0, 'the air trim at rest');
    expect((await host.untilStatus((s) => s.connections[0]?.isConnected === true, 'up')).phase).toBe(
      'tripped',
    );
  });

  it('a register answers by exception: its channel is bad, the others go on', async () => {
    host = await HostHarness.configured(testRig(device.port), null);
    device.failing.add(2);
    const { telemetry } = await host.until(
      () =>
        host.of('telemetry').findLast(({ telemetry: { rows } }) => {
          const values = rows.at(-1)?.values ?? [];
          return values[0] === 4 && values[1] === null;
        }),
      'a null stack temperature beside a good oxygen',
    );
    expect(telemetry.rows.at(-1)?.values).toEqual([
      ...[4, null, 0, 0, expect.anything(), 2],
      ...[null, null, null],
    ]);
    const status = await host.untilStatus((s) => s.channelFaults.length > 0, 'a channel fault');
    expect(status.channelFaults).toEqual([
      { channel: 'stackTemperature', code: 'adapter.refused', message: expect.stringMatching(/register/i) },
    ]);
  });

  it('NaN on the wire is no number: recorded as NULL, and trips by the staleness limit', async () => {
    const file = await runAtFour('nan');
    device.setFloat(0, NaN);
    const tripped = await host.untilStatus((s) => s.phase === 'tripped', 'tripped');
    expect(tripped.trip?.cause).toBe('stale:oxygen');
    await host.until(() => host.last('run-ended'), 'the end of the run');
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.oxygen.at(-1)).toBeNull();
    expect(run.oxygen[0]).toBe(4);
    await host.until(() => device.airTrim === 0, 'the air trim at rest');
  });

  it('the port is refused: it is offline, says why in words, and comes up when the device does', async () => {
    const { port } = device;
    await device.cut();
    host = await HostHarness.configured(testRig(port));
    const offline = await host.untilStatus((s) => s.connections[0]?.error !== null, 'an error');
    expect(offline.phase).toBe('offline');
    expect(offline.connections[0]?.error).toMatch(new RegExp(`127\\.0\\.0\\.1:${port}.*refuse`));
    expect(await host.reply({ type: 'arm', by: 'engineer' })).not.toBeNull();
    device = await ModbusDevice.start(port);
    await host.untilStatus((s) => s.phase === 'idle', 'idle');
  });

  it('nothing ever answers: configure is answered in time all the same', async () => {
    const silent = createServer();
    silent.listen(0, '127.0.0.1');
    await once(silent, 'listening');
    host = await HostHarness.configured(testRig((silent.address() as AddressInfo).port));
    const status = await host.untilStatus((s) => s.armingObstacles.length > 0, 'obstacles to arming');
    expect(status.phase).not.toBe('armed');
    silent.close();
  });

  it('garbage: it is answered as an error, and changes nothing', async () => {
    host = await HostHarness.configured(testRig(device.port));
    host.send({ type: 'command', requestId: 900, command: { type: 'launch', by: 'nobody' } });
    host.send({ type: 'nonsense' });
    host.send('nonsense');
    const reply = await host.until(() => host.of('reply').find((r) => r.requestId === 900), 'the reply');
    expect(reply.error).toMatchObject({ code: 'request.invalid', details: [{ field: 'command.type' }] });
    await host.until(() => host.of('log').filter((m) => m.level === 'error').length >= 3, 'three errors');
    await host.untilStatus((s) => s.phase === 'idle', 'idle');
  });

  it('a wrong wiring is named by field, and a command before any is refused', async () => {
    host = await HostHarness.start();
    expect(await host.reply({ type: 'arm', by: 'engineer' })).toMatchObject({ code: 'host.unavailable' });
    const rig = testRig(device.port);
    const configure = (changed: typeof rig) =>
      host.reply({
        type: 'configure',
        rig: changed,
        envelope: testEnvelope(),
        trip: null,
        isLockedOut: false,
      });
    const wrong = structuredClone(rig);
    Object.assign(wrong.connections[0] ?? {}, { configuration: { host: '127.0.0.1', port: 'x' } });
    expect(await configure(wrong)).toMatchObject({
      code: 'adapter.misconfigured',
      details: [{ field: 'connections[0].configuration.port' }],
    });
    Object.assign(wrong.connections[0] ?? {}, { adapter: 'carrier-pigeon' });
    expect(await configure(wrong)).toMatchObject({ code: 'adapter.unknown' });
    expect(await configure(rig)).toBeNull();
    await host.untilStatus((s) => s.phase === 'idle', 'idle');
  });

  it('begins tripped where a trip was latched before it: it brings the rig to rest and lets nobody arm', async () => {
    host = await HostHarness.start();
    const trip = {
      cause: 'host-lost',
      message: 'Lost.',
      at: '2026-03-01T08:00:00.000Z',
      by: null,
      later: [],
    };
    device.words[4] = 300;
    const rig = testRig(device.port);
    await host.ask({ type: 'configure', rig, envelope: testEnvelope(), trip, isLockedOut: false });
    await host.untilStatus((s) => s.phase === 'tripped' && s.trip?.cause === 'host-lost', 'tripped');
    await host.until(() => device.airTrim === 0, 'the air trim at rest');
    expect(await host.reply({ type: 'arm', by: 'engineer' })).toMatchObject({ code: 'rig.tripped' });
  });
});
