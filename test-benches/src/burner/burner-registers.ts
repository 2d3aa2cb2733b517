import { BurnerFault, type BurnerSimulation } from './burner-simulation.js';
import { ModbusException, type RegisterMap } from './modbus-face.js';

/** Unit that a rig host talks to, and the unit of the instructor; addresses as in the protocol, from 0. */
export const burnerUnit = 1;
export const instructorUnit = 247;
export const faultRegister = 100;

export const BurnerRegister = {
  airTrim: 0,
  heartbeat: 1,
  damper: 2,
  o2: 3,
  co: 4,
  flueTemp: 6,
  airTemp: 7,
  flame: 8,
  watchdogFlag: 9,
  watchdogCount: 10,
  fuelFlow: 11,
} as const;

const sensorRegisters = { first: BurnerRegister.o2, last: BurnerRegister.airTemp };
const maxTrimRaw = 10_000;

/** Told of every write that the bench accepted. */
export type OnWrite = (unit: number, register: number, value: number, engineering: number) => void;

/** The two register maps of the burner: the rig's own (unit 1) and the instructor's (unit 247). */
export function burnerRegisterMap(simulation: BurnerSimulation, onWrite: OnWrite): RegisterMap {
  return {
    read(unit, address, count) {
      const words = wordsOf(unit, simulation);
      const isSensorAsked =
        unit === burnerUnit && address <= sensorRegisters.last && address + count > sensorRegisters.first;
      if (simulation.fault === BurnerFault.sensorExceptions && isSensorAsked) {
        throw new ModbusException('device-failure');
      }
      return Array.from({ length: count }, (_, index) => {
        const word = words.get(address + index);
        if (word === undefined) throw new ModbusException('address');
        return word;
      });
    },
    write(unit, address, values) {
      // All are judged before any is taken: a refused request changes nothing.
      values.forEach((value, index) => checkWrite(unit, address + index, value));
      values.forEach((value, index) => {
        const register = address + index;
        onWrite(unit, register, value, takeWrite(simulation, unit, register, value));
      });
    },
  };
}

function checkWrite(unit: number, register: number, value: number): void {
  if (unit === burnerUnit && register === BurnerRegister.heartbeat) return;
  if (unit === burnerUnit && register === BurnerRegister.airTrim) {
    if (value > maxTrimRaw) throw new ModbusException('value');
    return;
  }
  if (unit === instructorUnit && register === faultRegister) {
    if (value > BurnerFault.frozen) throw new ModbusException('value');
    return;
  }
  throw new ModbusException(unit === burnerUnit || unit === instructorUnit ? 'address' : 'no-such-unit');
}

/** @returns the value in its engineering unit */
function takeWrite(simulation: BurnerSimulation, unit: number, register: number, value: number): number {
  if (unit === instructorUnit) simulation.fault = value;
  else if (register === BurnerRegister.heartbeat) simulation.writeHeartbeat(value);
  else {
    simulation.writeTrim(value / 100);
    return value / 100;
  }
  return value;
}

function wordsOf(unit: number, simulation: BurnerSimulation): Map<number, number> {
  if (unit === burnerUnit) return burnerWords(simulation);
  if (unit === instructorUnit) return instructorWords(simulation);
  throw new ModbusException('no-such-unit');
}

function burnerWords(simulation: BurnerSimulation): Map<number, number> {
  const { now, readings, fault } = simulation;
  const [coHigh, coLow] = floatWords(fault === BurnerFault.coNotANumber ? NaN : readings.coPpm);
  const [fuelHigh, fuelLow] = floatWords(readings.fuelFlowM3PerH);
  return new Map([
    [BurnerRegister.airTrim, Math.round(now.commandPct * 100)],
    [BurnerRegister.heartbeat, now.watchdog.beat],
    [BurnerRegister.damper, Math.round(readings.damperPct * 100)],
    [BurnerRegister.o2, Math.round(readings.o2Pct * 100)],
    [BurnerRegister.co, coHigh],
    [BurnerRegister.co + 1, coLow],
    [BurnerRegister.flueTemp, signedWord(readings.flueTempC * 10)],
    [BurnerRegister.airTemp, signedWord(readings.airTempC * 10)],
    [BurnerRegister.flame, now.isFlameOn ? 1 : 0],
    [BurnerRegister.watchdogFlag, now.watchdog.isTripped ? 1 : 0],
    [BurnerRegister.watchdogCount, now.watchdog.count & 0xffff],
    [BurnerRegister.fuelFlow, fuelHigh],
    [BurnerRegister.fuelFlow + 1, fuelLow],
  ]);
}

function instructorWords(simulation: BurnerSimulation): Map<number, number> {
  const { best, efficiencyPct } = simulation.truth;
  const floats = [best.trimPct, best.efficiencyPct, efficiencyPct, simulation.now.tS];
  const words = new Map([[faultRegister, simulation.fault]]);
  floats.flatMap(floatWords).forEach((word, address) => words.set(address, word));
  return words;
}

/** IEEE 754 single precision as two registers, high word first. */
function floatWords(value: number): [number, number] {
  const bytes = Buffer.alloc(4);
  bytes.writeFloatBE(value);
  return [bytes.readUInt16BE(0), bytes.readUInt16BE(2)];
}

function signedWord(value: number): number {
  return Math.round(value) & 0xffff;
}
