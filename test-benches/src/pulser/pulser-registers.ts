import type { RegisterMap } from '../kit/register-map.types.js';
import { settingRange } from './pulser-model.js';

const percent = { type: 'u16', scale: 0.01 } as const;
const flag = { table: 'discrete-input', type: 'bit', isOfController: true } as const;

/** The registers of the pulser's controller; the trace is 512 input registers, 10 ns apart. */
export const pulserRegisters: RegisterMap = {
  unit: 1,
  fields: [
    { name: 'drive', table: 'holding-register', address: 0, ...percent, writeRange: settingRange.drivePct },
    {
      name: 'delay',
      table: 'holding-register',
      address: 1,
      type: 'u16',
      scale: 0.1,
      writeRange: settingRange.delayUs,
    },
    { name: 'heartbeat', table: 'holding-register', address: 2, type: 'u16' },
    { name: 'protectionReset', table: 'coil', address: 0, type: 'bit' },
    { name: 'driveActual', table: 'input-register', address: 0, ...percent },
    { name: 'energy', table: 'input-register', address: 1, type: 'f32' },
    { name: 'watchdogCount', table: 'input-register', address: 3, type: 'u16', isOfController: true },
    { name: 'pulse', table: 'input-register', address: 1000, type: 'i16', scale: 0.1 },
    { name: 'laserOn', address: 0, ...flag },
    { name: 'protectionTrip', address: 1, ...flag },
    { name: 'watchdogFlag', address: 2, ...flag },
  ],
};
