import type { RegisterMap } from '../kit/register-map.types.js';

const percent = { type: 'u16', scale: 0.01 } as const;
const flag = { table: 'discrete-input', type: 'bit', isOfController: true } as const;

/** The registers of the matching network's controller: commands held, readings as inputs, flags as bits. */
export const matcherRegisters: RegisterMap = {
  unit: 1,
  fields: [
    { name: 'shunt', table: 'holding-register', address: 0, ...percent, writeRange: [0, 100] },
    { name: 'series', table: 'holding-register', address: 1, ...percent, writeRange: [0, 100] },
    { name: 'heartbeat', table: 'holding-register', address: 2, type: 'u16' },
    { name: 'generatorReset', table: 'coil', address: 0, type: 'bit' },
    { name: 'shuntPosition', table: 'input-register', address: 0, ...percent },
    { name: 'seriesPosition', table: 'input-register', address: 1, ...percent },
    { name: 'forward', table: 'input-register', address: 2, type: 'f32' },
    { name: 'reflected', table: 'input-register', address: 4, type: 'f32' },
    { name: 'gammaMagnitude', table: 'input-register', address: 6, type: 'u16', scale: 0.0001 },
    { name: 'gammaPhase', table: 'input-register', address: 7, type: 'i16', scale: 0.1 },
    { name: 'watchdogCount', table: 'input-register', address: 8, type: 'u16', isOfController: true },
    { name: 'rfOn', address: 0, ...flag },
    { name: 'generatorTrip', address: 1, ...flag },
    { name: 'foldback', address: 2, ...flag },
    { name: 'watchdogFlag', address: 3, ...flag },
  ],
};
