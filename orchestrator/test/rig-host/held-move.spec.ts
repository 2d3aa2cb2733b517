import { setTimeout as sleep } from 'node:timers/promises';
import { HostHarness } from './host-harness.js';
import { ModbusDevice } from './modbus-device.js';
import { testEnvelope, testRig } from './test-rig.js';

jest.setTimeout(90_000);

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

/** Slow enough that a move takes longer than any hold. */
function slowEnvelope() {
  const envelope = testEnvelope();
  for (const limit of envelope.content.limits) limit.slewPerS = 2;
  return envelope;
}

describe('a held move on a real wire', () => {
  const goal = 10;
  const press = (id: string) =>
    ({ type: 'move', channel: 'airTrim', value: goal, by: 'technician', hold: { id, forS: 1 } }) as const;
  const armed = async () => {
    host = await HostHarness.configured(testRig(device.port), slowEnvelope());
    await host.untilStatus((s) => s.armingObstacles.length === 0, 'ready to arm');
    await host.arm();
  };

  it('stops within its time once nobody renews it, far from its goal', async () => {
    await armed();
    await host.ask(press('one'));
    await sleep(300);
    await host.ask(press('one'));
    const renewedMs = performance.now();
    const held = await host.untilStatus((s) => s.heldMoves.length > 0, 'held');
    expect(held.heldMoves).toEqual([{ channel: 'airTrim', value: goal, by: 'technician' }]);
    await host.until(() => host.status?.heldMoves.length === 0, 'no longer held');
    const stoppedAt = device.airTrim;
    expect(performance.now() - renewedMs).toBeGreaterThan(500);
    expect(stoppedAt).toBeGreaterThan(1);
    expect(stoppedAt).toBeLessThan(goal);
    await sleep(600);
    expect(device.airTrim).toBe(stoppedAt);
    expect(await host.reply(press('one'))).toMatchObject({ code: 'move.hold-ended' });
  });

  it('stops at once when it is released', async () => {
    await armed();
    await host.ask(press('two'));
    await host.until(() => device.airTrim > 0, 'it moves');
    await host.ask({ type: 'release-move', channel: 'airTrim', holdId: 'two' });
    const stoppedAt = device.airTrim;
    await sleep(300);
    // The scan under way when the release came may write once more.
    expect(device.airTrim - stoppedAt).toBeLessThan(2);
    const rest = device.airTrim;
    await sleep(300);
    expect(device.airTrim).toBe(rest);
  });
});

describe('a stop outside of a run', () => {
  it('is recorded from before the trip until rest, with the time of each actuator', async () => {
    host = await HostHarness.configured(testRig(device.port));
    await host.untilStatus((s) => s.armingObstacles.length === 0, 'ready to arm');
    await host.arm();
    await host.ask({ type: 'move', channel: 'airTrim', value: 4, by: 'technician', hold: null });
    await host.until(() => device.airTrim === 4, 'the air trim at 4');
    await host.ask({ type: 'emergency-stop', by: 'technician', reason: 'Smoke.' });
    const { trip, trajectory } = await host.until(() => host.last('stop-trajectory'), 'the trajectory');
    const status = host.last('status')?.status;
    expect(trip).toEqual({ cause: 'emergency-stop', at: status?.trip?.at });
    expect(trajectory.isAtRest).toBe(true);
    const applied = trajectory.columns.indexOf('airTrim.applied');
    const before = trajectory.rows.filter(({ tS }) => tS < 0);
    expect(before.length).toBeGreaterThan(0);
    expect(before.at(-1)?.values[applied]).toBe(4);
    const values = trajectory.rows.filter(({ tS }) => tS >= 0).map((row) => row.values[applied] ?? null);
    expect(values.some((value) => value === 0)).toBe(true);
    const { timeS } = trajectory.timesToRest.find(({ channel }) => channel === 'airTrim') ?? {};
    expect(timeS).toBeGreaterThan(0);
    expect(timeS).toBeLessThan(5);
  });
});
