import type { RegisterField, RegisterMap } from '../kit/register-map.types.js';
import { maxTrimPct } from './burner-simulation.js';

const holding = (
  name: string,
  address: number,
  type: RegisterField['type'],
  rest: Partial<RegisterField> = {},
): RegisterField => ({ name, table: 'holding-register', address, type, ...rest });

/** The registers of the burner's controller. */
export const burnerRegisters: RegisterMap = {
  unit: 1,
  fields: [
    holding('airTrim', 0, 'u16', { scale: 0.01, writeRange: [0, maxTrimPct] }),
    holding('heartbeat', 1, 'u16'),
    holding('damper', 2, 'u16', { scale: 0.01 }),
    holding('o2', 3, 'u16', { scale: 0.01 }),
    holding('co', 4, 'f32'),
    holding('flueTemp', 6, 'i16', { scale: 0.1 }),
    holding('airTemp', 7, 'i16', { scale: 0.1 }),
    holding('flame', 8, 'u16', { isOfController: true }),
    holding('watchdogFlag', 9, 'u16', { isOfController: true }),
    holding('watchdogCount', 10, 'u16', { isOfController: true }),
    holding('fuelFlow', 11, 'f32'),
  ],
};
