import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { expectContinuous, HostHarness, storedRun } from './host-harness.js';
import { ModbusDevice } from './modbus-device.js';
import { temporaryFolder } from './run-file-fixture.js';
import { testRig } from './test-rig.js';

jest.setTimeout(120_000);

describe('rig host, killed in mid-run', () => {
  const folder = temporaryFolder();
  afterAll(folder.remove);

  it.each(Array.from({ length: 10 }, (_, i) => [i + 1, i % 2 === 0 ? 5 : 50]))(
    'loses 100 ms of samples at most (kill %i, period %i ms)',
    async (kill, periodMs) => {
      const device = await ModbusDevice.start();
      const host = await HostHarness.configured(testRig(device.port, periodMs));
      try {
        const file = join(folder.path, `${kill}.sqlite`);
        await host.startRun(`run-${kill}`, file, 600);
        await host.until(() => device.airTrim === 4, 'the air trim at 4');
        await delay(37 * kill);
        host.child.kill('SIGKILL');
        await host.exited;
        const run = storedRun(file);
        expectContinuous(run);
        const seenS = host.last('telemetry')?.telemetry.rows.at(-1)?.tS ?? NaN;
        expect(run.tS.at(-1)).toBeGreaterThan(seenS - 0.1);
      } finally {
        await host.end();
        await device.cut();
      }
    },
  );
});
