import type { BenchWire } from './bench-definition.js';
import type { BenchLog } from './bench-log.js';
import type { BenchOptions, LineOptions } from './bench-options.js';
import type { FaultedModel } from './faulted-model.js';
import { serveModbusRtu } from './modbus-rtu-face.js';
import { ModbusStation } from './modbus-station.js';
import { openModbusTcpFace } from './modbus-tcp-face.js';
import type { RegisterWrite } from './register-device.js';
import { openSerialLine, type SerialLine } from './serial-line.js';
import { serveSerialText } from './serial-text-face.js';
import { TextStation } from './text-station.js';

/** Where a bench is reached: a TCP port or the path of a serial line. */
export type BenchPlace = { readonly port: number } | { readonly path: string };

export interface BenchFace {
  readonly place: BenchPlace;
  /** Ends all connections, as a controller that lost power. */
  hangUp(): void;
  close(): Promise<void>;
}

/** @param catchUp brings the model to the present; called before each request and after each write */
export async function openBenchFace(
  wire: BenchWire,
  options: BenchOptions,
  model: FaultedModel,
  catchUp: () => void,
  log: BenchLog,
): Promise<BenchFace> {
  if (wire.kind === 'serial-text') {
    const station = new TextStation(wire.commands, model, catchUp, textWatch(model, log, catchUp));
    const line = await openSerialLine(lineSettings(options.line, 'none'));
    serveSerialText(station, line);
    return faceOn(line, () => {});
  }
  const station = new ModbusStation(
    wire.registers,
    options.unit,
    model,
    catchUp,
    modbusWatch(model, log, catchUp),
  );
  if (wire.kind === 'modbus-rtu') {
    const settings = lineSettings(options.line, 'even');
    const line = await openSerialLine(settings);
    const { stop } = serveModbusRtu(station, line, frameEndMs(settings.baud));
    return faceOn(line, stop);
  }
  const { host, port } = options.tcp ?? { host: '127.0.0.1', port: 0 };
  const face = await openModbusTcpFace(station, host, port);
  return { place: { port: face.port }, hangUp: () => face.hangUp(), close: () => face.close() };
}

/**
 * End of a frame, ms: 3.5 characters of 11 bits (serial line guide, V1.02, section 2.5.1.1), and what a process
 * that is no real-time one may be late.
 */
function frameEndMs(baud: number): number {
  const processMs = 20;
  return Math.max((3.5 * 11_000) / baud, 1.75) + processMs;
}

function lineSettings(line: LineOptions | null, parity: 'none' | 'even') {
  if (!line) throw new Error('A bench on a serial line needs --pty or --serial.');
  return { ...line, parity: line.parity ?? parity, stopBits: line.stop };
}

function faceOn(line: SerialLine, stop: () => void): BenchFace {
  return {
    place: { path: line.path },
    hangUp: () => {},
    close: () => {
      stop();
      return line.close();
    },
  };
}

function modbusWatch(model: FaultedModel, log: BenchLog, after: () => void) {
  return {
    onWrite: (unit: number, { name, register, value, engineering }: RegisterWrite) => {
      log.add(model.tS, { event: 'write', unit, register, value, name, engineering });
      after();
    },
    onRefused: (unit: number, register: number, values: readonly number[]) =>
      log.add(model.tS, { event: 'refused', unit, register, values }),
  };
}

function textWatch(model: FaultedModel, log: BenchLog, after: () => void) {
  return {
    onWrite: (name: string, engineering: number, command: string) => {
      log.add(model.tS, { event: 'write', command, name, engineering });
      after();
    },
    onRefused: (command: string) => log.add(model.tS, { event: 'refused', command }),
  };
}
