import { type AdapterSession, type ModbusAddress, modbusTcpAdapter } from '@cresthold/adapters';
import modbus from 'modbus-serial';
import type { Benchmark } from '../benchmark.types.js';
import { compileProgram, firstLineOf, startProgram } from '../compiled-program.js';

const ModbusClient = modbus.default;

/** Short rounds, in alternation between the three clients, so that all of them see the same machine. */
const reads = 500;
const rounds = 41;

export interface ModbusReadRates {
  /** Reads of eight registers per second. */
  adapter: number;
  bareLoop: number;
  libmodbus: number;
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
  for (let turn = 0; turn < reads; turn += 1) {
    const { values } = await session.read(plan);
    if (values[7] !== 7) throw new Error('The adapter read something else than the server holds.');
  }
}

async function readByBareLoop(client: InstanceType<typeof ModbusClient>): Promise<void> {
  for (let turn = 0; turn < reads; turn += 1) {
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
    const times = { adapter: [] as number[], bareLoop: [] as number[], libmodbus: [] as number[] };
    for (let round = 0; round < rounds; round += 1) {
      times.adapter.push(await secondsOf(() => readByAdapter(session)));
      times.bareLoop.push(await secondsOf(() => readByBareLoop(client)));
      times.libmodbus.push(
        Number(await firstLineOf(program.path, ['read-tcp', String(port), String(reads)])),
      );
    }
    return {
      adapter: reads / median(times.adapter),
      bareLoop: reads / median(times.bareLoop),
      libmodbus: reads / median(times.libmodbus),
    };
  } finally {
    client.close(() => undefined);
    await session.close();
    await server.stop();
    await program.remove();
  }
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
        ratio: rates.adapter / rates[client],
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
