import type { RegisterTable } from './register-map.types.js';

/** What answers under one unit number; all methods refuse by a ModbusException. */
export interface ModbusDevice {
  /** @returns `count` words or bits (0 or 1) of one moment */
  read(table: RegisterTable, address: number, count: number): number[];
  /** Takes all of it or nothing. Words for holding registers, bits for coils. */
  write(table: 'coil' | 'holding-register', address: number, values: readonly number[]): void;
}
