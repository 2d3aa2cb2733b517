import { expect, it } from 'vitest';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { modbusRtuAdapter } from './modbus-rtu.adapter.js';
import { modbusRtuConfigurationSchema } from './modbus-rtu-configuration.schema.js';
import { withChecksum } from './testing/answer-frame.js';
import { startScriptedLine } from './testing/scripted-line.js';

const spanMs = 60_000;
/** What an exchange takes at 19 200 baud; a pseudo-terminal itself takes no time. */
const answerDelayMs = 12;

const addressOf = (unit: number): ModbusAddress =>
  modbusAddressSchema.parse({ unit, table: 'holding-register', address: 0, type: 'u16' });

/** Scans in real time, on a pseudo-terminal, in which every living unit was read. */
async function scansOf(units: readonly number[], dead: readonly number[]): Promise<number> {
  const line = await startScriptedLine((frame, send) => {
    const unit = frame[0] ?? 0;
    if (dead.includes(unit)) return;
    setTimeout(() => {
      send(withChecksum([unit, 3, 2, 0, unit]));
    }, answerDelayMs);
  });
  const configuration = modbusRtuConfigurationSchema.parse({
    path: line.path,
    unitTimeoutMs: 200,
    timeoutMs: 5000,
  });
  const session = await modbusRtuAdapter.open(configuration, new AbortController().signal);
  const plan = session.planRead(units.map(addressOf));
  const endMs = performance.now() + spanMs;
  let scans = 0;
  while (performance.now() < endMs) {
    const { values } = await session.read(plan);
    if (units.every((unit, index) => dead.includes(unit) || values[index] === unit)) scans += 1;
  }
  await session.close();
  await line.stop();
  return scans;
}

it(
  'six units beside two dead ones keep 90 % of the scans that they have alone',
  { timeout: 200_000 },
  async () => {
    // Both lines at the same time, so that both see the same machine.
    const [alone, beside] = await Promise.all([
      scansOf([3, 4, 5, 6, 7, 8], []),
      scansOf([1, 2, 3, 4, 5, 6, 7, 8], [1, 2]),
    ]);
    console.log(`alone ${alone}, beside two dead units ${beside}: ${((100 * beside) / alone).toFixed(1)} %`);
    expect(beside / alone).toBeGreaterThanOrEqual(0.9);
  },
);
