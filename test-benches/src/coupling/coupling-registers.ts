import type { RegisterMap } from '../kit/register-map.types.js';
import { driveRange } from './coupling-model.js';

/** The registers of the coupling's controller: commands in holding, readings in input registers. */
export const couplingRegisters: RegisterMap = {
  unit: 5,
  fields: [
    {
      name: 'driveX',
      table: 'holding-register',
      address: 0,
      type: 'u16',
      scale: 0.01,
      writeRange: driveRange,
    },
    {
      name: 'driveY',
      table: 'holding-register',
      address: 1,
      type: 'u16',
      scale: 0.01,
      writeRange: driveRange,
    },
    { name: 'heartbeat', table: 'holding-register', address: 2, type: 'u16' },
    { name: 'powerDbm', table: 'input-register', address: 0, type: 'f32' },
    { name: 'powerMw', table: 'input-register', address: 2, type: 'f32' },
    { name: 'mountTemp', table: 'input-register', address: 4, type: 'i16', scale: 0.01 },
    { name: 'watchdogCount', table: 'input-register', address: 5, type: 'u16', isOfController: true },
    { name: 'shutterOpen', table: 'discrete-input', address: 0, type: 'bit', isOfController: true },
    { name: 'watchdogFlag', table: 'discrete-input', address: 1, type: 'bit', isOfController: true },
  ],
};
