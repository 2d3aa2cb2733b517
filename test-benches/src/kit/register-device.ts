import type { RigModel } from '@cresthold/shared';
import { ModbusException } from './modbus-exception.js';
import type { ModbusDevice } from './modbus-device.js';
import type { RegisterField, RegisterMap, RegisterTable } from './register-map.types.js';
import { decodeValue, encodeValue, wordsOfType } from './register-words.js';

/** A field with where it begins and how many registers it takes. */
interface PlacedField extends RegisterField {
  readonly points: number;
  readonly length: number;
}

/** One accepted value of a request. */
export interface RegisterWrite {
  readonly name: string;
  readonly register: number;
  /** The word as it came; for two words the engineering value. */
  readonly value: number;
  readonly engineering: number;
}

/** The registers of a bench over its model. */
export class RegisterDevice implements ModbusDevice {
  private readonly placeOf = new Map<RegisterTable, Map<number, PlacedField>>();
  /** A trace as it was when its first register was last read: several requests get one picture of it. */
  private readonly latched = new Map<string, number[]>();

  /**
   * @param onWrite told of each value that the model took
   * @throws Error where two fields overlap or name no value of the model
   */
  constructor(
    map: RegisterMap,
    private readonly model: RigModel,
    private readonly onWrite: (write: RegisterWrite) => void = () => {},
  ) {
    for (const field of map.fields) this.place(field);
  }

  read(table: RegisterTable, address: number, count: number): number[] {
    const shown = new Map<PlacedField, number[]>();
    return Array.from({ length: count }, (_, index) => {
      const field = this.fieldAt(table, address + index);
      let words = shown.get(field);
      if (!words) shown.set(field, (words = this.wordsOf(field, address + index === field.address)));
      return words[address + index - field.address] ?? 0;
    });
  }

  /** Names of the values that a request touches. */
  namesIn(table: RegisterTable, address: number, count: number): Set<string> {
    const fields = this.placeOf.get(table);
    const names = new Set<string>();
    for (let at = address; at < address + count; at += 1) {
      const name = fields?.get(at)?.name;
      if (name !== undefined) names.add(name);
    }
    return names;
  }

  write(table: 'coil' | 'holding-register', address: number, values: readonly number[]): void {
    // All are judged before any is taken: a refused request changes nothing.
    const writes = this.judge(table, address, values);
    for (const write of writes) {
      if (!this.model.write(write.name, write.engineering)) throw new ModbusException('device-failure');
      this.onWrite(write);
    }
  }

  private place(field: RegisterField): void {
    const value = this.model.values.find(({ name }) => name === field.name);
    if (!value) throw new Error(`The model has no value "${field.name}".`);
    const length = value.points * wordsOfType(field.type);
    const fields = this.placeOf.get(field.table) ?? new Map<number, PlacedField>();
    this.placeOf.set(field.table, fields);
    const placed = { ...field, points: value.points, length };
    for (let at = field.address; at < field.address + length; at += 1) {
      if (fields.has(at)) throw new Error(`"${field.name}" overlaps another at ${field.table} ${at}.`);
      fields.set(at, placed);
    }
  }

  private fieldAt(table: RegisterTable, address: number): PlacedField {
    const fields = this.placeOf.get(table);
    if (!fields) throw new ModbusException('function');
    const field = fields.get(address);
    if (!field) throw new ModbusException('address');
    return field;
  }

  private wordsOf(field: PlacedField, isFromFirst: boolean): number[] {
    const { name, points, type, scale = 1 } = field;
    if (points === 1) return encodeValue(this.model.read(name), type, scale);
    const kept = this.latched.get(name);
    if (kept && !isFromFirst) return kept;
    const words: number[] = [];
    for (const value of this.model.readTrace(name)) words.push(...encodeValue(value, type, scale));
    this.latched.set(name, words);
    return words;
  }

  private judge(table: RegisterTable, address: number, values: readonly number[]): RegisterWrite[] {
    const writes: RegisterWrite[] = [];
    for (let index = 0; index < values.length;) {
      const field = this.fieldAt(table, address + index);
      const value = this.model.values.find(({ name }) => name === field.name);
      if (!value?.isWritable) throw new ModbusException('address');
      const words = values.slice(index, index + field.length);
      // Half a number is none.
      if (address + index !== field.address || words.length < field.length)
        throw new ModbusException('value');
      const engineering = decodeValue(words, field.type, field.scale ?? 1);
      const [min, max] = field.writeRange ?? [-Infinity, Infinity];
      if (!(engineering >= min && engineering <= max)) throw new ModbusException('value');
      const raw = words.length === 1 ? (words[0] ?? 0) : engineering;
      writes.push({ name: field.name, register: address + index, value: raw, engineering });
      index += field.length;
    }
    return writes;
  }
}
