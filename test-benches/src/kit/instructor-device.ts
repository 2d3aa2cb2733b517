import type { FaultedModel } from './faulted-model.js';
import type { ModbusDevice } from './modbus-device.js';
import { ModbusException } from './modbus-exception.js';
import type { RegisterTable } from './register-map.types.js';
import { encodeValue } from './register-words.js';

/** Unit of the instructor, beside that of the rig. */
export const instructorUnit = 247;
/** Its holding registers: bench time, s, as f32; code of the fault to play, R/W. */
export const benchTimeRegister = 6;
export const faultRegister = 100;

/** What an instructor can reach; how good the rig could be is not among it. */
export class InstructorDevice implements ModbusDevice {
  constructor(
    private readonly model: FaultedModel,
    private readonly onWrite: (register: number, value: number) => void = () => {},
  ) {}

  read(table: RegisterTable, address: number, count: number): number[] {
    if (table !== 'holding-register') throw new ModbusException('function');
    const [high = 0, low = 0] = encodeValue(this.model.tS, 'f32', 1);
    const words = new Map([
      [benchTimeRegister, high],
      [benchTimeRegister + 1, low],
      [faultRegister, this.model.faultByHand],
    ]);
    return Array.from({ length: count }, (_, index) => {
      const word = words.get(address + index);
      if (word === undefined) throw new ModbusException('address');
      return word;
    });
  }

  write(table: RegisterTable, address: number, values: readonly number[]): void {
    if (table !== 'holding-register') throw new ModbusException('function');
    const [code = 0] = values;
    if (address !== faultRegister || values.length !== 1) throw new ModbusException('address');
    if (!this.model.setFaultByHand(code)) throw new ModbusException('value');
    this.onWrite(address, code);
  }
}
