import { join } from 'node:path';
import { RunFileReader } from '../../src/recordings/run-file/index.js';
import { expectContinuous, expectRestRecorded, HostHarness, storedRun } from './host-harness.js';
import { ModbusDevice } from './modbus-device.js';
import { temporaryFolder } from './run-file-fixture.js';
import { testRig } from './test-rig.js';

jest.setTimeout(90_000);

describe('rig host', () => {
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

  it('publishes what it reads, and answers to the device with a heartbeat', async () => {
    host = await HostHarness.configured(testRig(device.port));
    const { telemetry } = await host.until(
      () => host.of('telemetry').find((m) => m.telemetry.sequence > 3),
      'telemetry',
    );
    expect(telemetry.columns).toEqual([
      'oxygen',
      'stackTemperature',
      'airTrim',
      'fuelTrim',
      'heartbeat',
      'excess',
      'airTrim.applied',
      'fuelTrim.applied',
      'heartbeat.applied',
    ]);
    const row = telemetry.rows.at(-1);
    expect(row?.values.slice(0, 4)).toEqual([4, 180, 0, 0]);
    expect(row?.values.slice(5)).toEqual([2, null, null, null]);
    await host.untilStatus((s) => s.phase === 'idle', 'idle');
    const beats = () => device.writes.filter((w) => w.address === 6).map((w) => w.value);
    await host.until(() => beats().length >= 5, 'five heartbeats');
    expect(
      beats()
        .slice(1)
        .every((beat, i) => beat === (beats()[i] ?? 0) + 1),
    ).toBe(true);
    expect(device.airTrimWrites).toEqual([]);
  });

  it('tells screens what it writes whenever it holds the rig, not only in a run', async () => {
    host = await HostHarness.configured(testRig(device.port));
    await host.untilStatus((s) => s.armingObstacles.length === 0, 'ready to arm');
    await host.ask({ type: 'arm', by: 'technician' });
    await host.ask({ type: 'move', channel: 'airTrim', value: 3, by: 'technician', hold: null });
    const seen = (value: number | null) => () =>
      host.of('telemetry').findLast(({ telemetry: { columns, rows, runId } }) => {
        const at = columns.indexOf('airTrim.applied');
        return runId === null && at >= 0 && rows.at(-1)?.values[at] === value;
      });
    await host.until(seen(3), 'a 3 written by hand');
    await host.ask({ type: 'disarm', by: 'technician' });
    await host.untilStatus((s) => s.phase === 'idle', 'idle');
    host.messages.length = 0;
    await host.until(seen(null), 'nothing written');
  });

  it('arms, runs an experiment to its end and records every scan of it', async () => {
    const file = join(folder.path, 'whole.sqlite');
    host = await HostHarness.configured(testRig(device.port));
    await host.startRun('whole', file, 1);
    const ended = await host.until(() => host.last('run-ended'), 'the end of the run');
    expect(ended).toMatchObject({ runId: 'whole', status: 'finished' });
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.ks).toHaveLength(ended.scans);
    expect(run.end).toMatchObject({ status: 'finished', scans: ended.scans });
    expect(Math.max(...device.airTrimWrites)).toBe(4);
    expect(run.applied.some((value) => value === 4)).toBe(true);
    expect(device.airTrim).toBe(0);
    expect(host.of('run-event').map((m) => m.event.sequence)).toEqual(run.eventTypes.map((_, i) => i + 1));
    expect(run.eventTypes).toEqual(
      expect.arrayContaining(['run.started', 'step.started', 'step.ended', 'run.ended']),
    );
    const reader = await RunFileReader.open(file);
    expect((await reader.manifest()).rig.id).toBe('rig-1');
    await reader.close();
  });

  it('keeps each written step inside the slew limit of the envelope', async () => {
    const file = join(folder.path, 'slew.sqlite');
    host = await HostHarness.configured(testRig(device.port));
    await host.startRun('slew', file, 0.3);
    await host.until(() => host.last('run-ended'), 'the end of the run');
    const { applied, tS } = storedRun(file);
    applied.forEach((value, i) => {
      const before = applied[i - 1];
      if (i === 0 || value === null || before === null || before === undefined) return;
      const dtS = (tS[i] ?? 0) - (tS[i - 1] ?? 0);
      // 20 units a second; one step of the wire's grid is 0.01.
      expect(Math.abs(value - before)).toBeLessThanOrEqual(20 * dtS + 0.011);
    });
  });

  it('latches an emergency stop, brings the actuator to rest, and moves nothing until a reset', async () => {
    const file = join(folder.path, 'emergency.sqlite');
    host = await HostHarness.configured(testRig(device.port));
    await host.startRun('emergency', file, 60);
    await host.until(() => device.airTrim === 4, 'the air trim at 4');
    await host.ask({ type: 'emergency-stop', by: 'technician', reason: 'Smoke.' });
    const tripped = await host.untilStatus((s) => s.phase === 'tripped', 'tripped');
    expect(tripped.trip).toMatchObject({ cause: 'emergency-stop', by: 'technician' });
    const ended = await host.until(() => host.last('run-ended'), 'the end of the run');
    expect(ended.status).toBe('tripped');
    expect(device.airTrim).toBe(0);
    expect(await host.reply({ type: 'arm', by: 'engineer' })).toMatchObject({ code: 'rig.tripped' });
    const move = { type: 'move', channel: 'airTrim', value: 3, by: 'engineer', hold: null } as const;
    expect(await host.reply(move)).toMatchObject({ code: 'rig.tripped' });
    await host.askUntilTaken({ type: 'reset', by: 'safety', reason: 'Smoke gone.' });
    await host.untilStatus((s) => s.phase === 'idle' && s.trip === null, 'idle');
    expect(device.airTrim).toBe(0);
    const run = storedRun(file);
    expectContinuous(run);
    expect(run.end?.status).toBe('tripped');
    expectRestRecorded(run);
  });

  it('refuses a second run, and keeps the first one going', async () => {
    host = await HostHarness.configured(testRig(device.port));
    await host.startRun('first', join(folder.path, 'first.sqlite'), 60);
    const order = {
      runId: 'second',
      file: join(folder.path, 'second.sqlite'),
      by: 'engineer',
      experiment: { id: 'e', title: 'e', version: 1, graph: { steps: [], edges: [] } },
      objective: null,
      manifest: {},
    };
    expect(await host.reply({ type: 'start-run', order })).toMatchObject({ code: 'rig.busy' });
    await host.untilStatus((s) => s.phase === 'running' && s.runId === 'first', 'the first still runs');
  });

  it('says that a run file cannot be made, and does not start', async () => {
    host = await HostHarness.configured(testRig(device.port));
    const file = join(folder.path, 'whole.sqlite', 'inside-a-file.sqlite');
    await host.arm();
    const experiment = { id: 'e', title: 'e', version: 1, graph: { steps: [], edges: [] } };
    const order = { runId: 'r', file, by: 'engineer', experiment, objective: null, manifest: {} };
    expect(await host.reply({ type: 'start-run', order })).toMatchObject({ code: 'recorder.failed' });
    await host.untilStatus((s) => s.phase === 'armed' && s.runId === null, 'armed, no run');
  });
});
