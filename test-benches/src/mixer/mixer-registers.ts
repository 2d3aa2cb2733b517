import type { RegisterMap } from '../kit/register-map.types.js';
import { positionRange } from './mixer-model.js';

/** The registers of the mixer's controller. */
export const mixerRegisters: RegisterMap = {
  unit: 1,
  fields: [
    {
      name: 'distributor',
      table: 'holding-register',
      address: 0,
      type: 'u16',
      scale: 0.01,
      writeRange: positionRange,
    },
    { name: 'heartbeat', table: 'holding-register', address: 1, type: 'u16' },
    { name: 'position', table: 'input-register', address: 0, type: 'u16', scale: 0.01 },
    { name: 'cultureTemp', table: 'input-register', address: 1, type: 'i16', scale: 0.01 },
    { name: 'biomass', table: 'input-register', address: 2, type: 'f32' },
    { name: 'substrate', table: 'input-register', address: 4, type: 'f32' },
    { name: 'feedFlow', table: 'input-register', address: 6, type: 'f32' },
    { name: 'watchdogCount', table: 'input-register', address: 8, type: 'u16', isOfController: true },
    { name: 'pumpRunning', table: 'discrete-input', address: 0, type: 'bit', isOfController: true },
    { name: 'watchdogFlag', table: 'discrete-input', address: 1, type: 'bit', isOfController: true },
  ],
};
