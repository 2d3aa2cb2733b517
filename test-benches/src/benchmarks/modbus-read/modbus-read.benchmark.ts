import { type AdapterSession, type ModbusAddress, modbusTcpAdapter } from '@cresthold/adapters';
import modbus from 'modbus-serial';
import type { Benchmark } from '../benchmark.types.js';
import { compileProgram, firstLineOf, startProgram } from '../compiled-program.js';

const ModbusClient = modbus.default;

/**
 * Adapter and bare loop are compared in many short pairs, and the middle ratio counts: on a busy machine a client
 * runs twice as fast while it has a core to itself, and both of a pair see much the same machine.
 */
const pairs = 201;
const readsPerPair = 100;
/** The client in C is a process for itself each time. */
const rounds = 15;
const readsPerRound = 1000;

interface ModbusReadRates {
  /** Reads of eight registers per second, by the adapter. */
  adapter: number;
  bareLoop: number;
  libmodbus: number;
  /** Rate of the adapter over that of the other. */
  ratio: { bareLoop: number; libmodbus: number };
}

const eightRegisters: ModbusAddress[] = Array.from({ length: 8 }, (_, address) =>
  modbusTcpAdapter.manifest.addressSchema.parse({ table: 'holding-register', address, type: 'u16' }),
);

async function secondsOf(act: () => Promise<void>): Promise<number> {
  const startMs = performance.now();
  await act();
  return (performance.now() - startMs) / 1000;
}

async function readByAdapter(session: AdapterSession<ModbusAddress>): Promise<void> {
  const plan = session.planRead(eightRegisters);
  for (let turn = 0; turn < readsPerPair; turn += 1) {
    const { values } = await session.read(plan);
    if (values[7] !== 7) throw new Error('The adapter read something else than the server holds.');
  }
}

async function readByBareLoop(client: InstanceType<typeof ModbusClient>): Promise<void> {
  for (let turn = 0; turn < readsPerPair; turn += 1) {
    const { data } = await client.readHoldingRegisters(0, 8);
    if (data[7] !== 7) throw new Error('The bare loop read something else than the server holds.');
  }
}

function median(values: number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >>> 1] ?? NaN;
}

/** All three clients on one libmodbus server, in alternation. */
async function measure(): Promise<ModbusReadRates> {
  const program = await compileProgram('modbus-read/libmodbus-peer.c', ['modbus']);
  const server = await startProgram(program.path, ['serve-tcp']);
  const port = Number(server.said[0]);
  const configuration = modbusTcpAdapter.manifest.configurationSchema.parse({ host: '127.0.0.1', port });
  const session = await modbusTcpAdapter.open(configuration, new AbortController().signal);
  const client = new ModbusClient();
  try {
    await client.connectTCP('127.0.0.1', { port });
    client.setID(1);
    client.setTimeout(1000);
    const times = await timesOf(
      () => readByAdapter(session),
      () => readByBareLoop(client),
      async () => Number(await firstLineOf(program.path, ['read-tcp', String(port), String(readsPerRound)])),
    );
    return ratesOf(times);
  } finally {
    client.close(() => undefined);
    await session.close();
    await server.stop();
    await program.remove();
  }
}

/** Seconds of each pair, or round. */
interface Times {
  adapter: number[];
  bareLoop: number[];
  libmodbus: number[];
}

async function timesOf(
  adapter: () => Promise<void>,
  bareLoop: () => Promise<void>,
  libmodbus: () => Promise<number>,
): Promise<Times> {
  const times: Times = { adapter: [], bareLoop: [], libmodbus: [] };
  for (let pair = 0; pair < pairs; pair += 1) {
    // Who comes first changes, since each finds the caches as the one before left them.
    if (pair % 2) times.bareLoop.push(await secondsOf(bareLoop));
    times.adapter.push(await secondsOf(adapter));
    if (pair % 2 === 0) times.bareLoop.push(await secondsOf(bareLoop));
    if (pair % Math.ceil(pairs / rounds) === 0) times.libmodbus.push(await libmodbus());
  }
  return times;
}

function ratesOf(times: Times): ModbusReadRates {
  const adapter = readsPerPair / median(times.adapter);
  const libmodbus = readsPerRound / median(times.libmodbus);
  const pairRatios = times.bareLoop.map((seconds, pair) => seconds / (times.adapter[pair] ?? NaN));
  return {
    adapter,
    bareLoop: readsPerPair / median(times.bareLoop),
    libmodbus,
    ratio: { bareLoop: median(pairRatios), libmodbus: adapter / libmodbus },
  };
}

let measured: Promise<ModbusReadRates> | null = null;
const ratesOfThisRun = (): Promise<ModbusReadRates> => (measured ??= measure());

function benchmarkAgainst(client: 'bareLoop' | 'libmodbus', name: string, against: string): Benchmark {
  return {
    name: `modbus-read/${name}`,
    purpose: `Modbus TCP reads of eight registers per second against ${against}.`,
    async run() {
      const rates = await ratesOfThisRun();
      return {
        name: this.name,
        value: rates.adapter,
        unit: 'reads/s',
        ratio: rates.ratio[client],
        against: `${against} (${Math.round(rates[client])} reads/s)`,
      };
    },
  };
}

/** The adapter against others on one server of libmodbus, measured together in one run. */
export const modbusReads: readonly Benchmark[] = [
  benchmarkAgainst('bareLoop', 'bare-loop', 'a bare modbus-serial loop on the same server'),
  benchmarkAgainst('libmodbus', 'libmodbus', 'a client on libmodbus, in C, on the same server'),
];
