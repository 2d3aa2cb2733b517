import {
  type AdapterSession,
  type ModbusAddress,
  modbusRtuAdapter,
  type ReadPlan,
} from '@cresthold/adapters';
import type { Benchmark } from '../benchmark.types.js';
import { compileProgram, startProgram } from '../compiled-program.js';

const baudRate = 115_200;
/** Start bit, eight data bits, stop bit. */
const characterS = 10 / baudRate;
/** MODBUS over Serial Line V1.02, 2.5.1.1: fixed above 19 200 baud. */
const silentIntervalS = 1.75e-3;
/** Eight registers: a request of 8 characters, an answer of 21. */
const exchangeS = 29 * characterS + 2 * silentIntervalS;

/** The middle one of many single reads counts: what else the machine does now and then is not the wire's. */
const reads = 1;
const rounds = 801;

/** Reads per second of eight registers over a line that is as slow as a real one. */
async function measure(): Promise<number> {
  const relayProgram = await compileProgram('rtu-read/pacing-relay.c');
  const peerProgram = await compileProgram('modbus-read/libmodbus-peer.c', ['modbus']);
  const toNs = (seconds: number): string => String(Math.round(seconds * 1e9));
  const relay = await startProgram(relayProgram.path, [toNs(characterS), toNs(silentIntervalS)]);
  const [path = '', devicePath = ''] = relay.said;
  const server = await startProgram(peerProgram.path, ['serve-rtu', devicePath, String(baudRate)]);
  try {
    return await readsPerS(path);
  } finally {
    await server.stop();
    await relay.stop();
    await peerProgram.remove();
    await relayProgram.remove();
  }
}

async function readsPerS(path: string): Promise<number> {
  const { addressSchema, configurationSchema } = modbusRtuAdapter.manifest;
  const addresses: ModbusAddress[] = Array.from({ length: 8 }, (_, address) =>
    addressSchema.parse({ table: 'holding-register', address, type: 'u16' }),
  );
  const configuration = configurationSchema.parse({ path, baudRate, parity: 'none' });
  const session = await modbusRtuAdapter.open(configuration, new AbortController().signal);
  const plan = session.planRead(addresses);
  const rates: number[] = [];
  try {
    for (let round = 0; round < rounds; round += 1) rates.push(await rateOfRound(session, plan));
  } finally {
    await session.close();
  }
  return rates.sort((a, b) => a - b)[rounds >>> 1] ?? NaN;
}

/** Reads that fail, on a machine too busy to pace the line, take their time and count for nothing. */
async function rateOfRound(session: AdapterSession<ModbusAddress>, plan: ReadPlan): Promise<number> {
  const startMs = performance.now();
  let good = 0;
  for (let turn = 0; turn < reads; turn += 1) {
    const { values, faults, lost } = await session.read(plan);
    if (lost) throw lost;
    if (faults[7]) continue;
    if (values[7] !== 7) throw new Error('The adapter read something else than the server holds.');
    good += 1;
  }
  return (good * 1000) / (performance.now() - startMs);
}

/** The adapter against what the wire allows. */
export const rtuRead: Benchmark = {
  name: 'rtu-read',
  purpose: 'Modbus RTU reads of eight registers per second at 115200 baud against what the wire allows.',
  async run() {
    const value = await measure();
    return {
      name: this.name,
      value,
      unit: 'reads/s',
      ratio: value * exchangeS,
      against: `the wire: 29 characters of 10 bits and two silent intervals (${(1 / exchangeS).toFixed(1)} reads/s)`,
    };
  },
};
