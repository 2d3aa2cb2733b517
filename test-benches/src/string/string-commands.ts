import type { CommandMap } from '../kit/command-map.types.js';
import { voltageRange } from './string-model.js';

/** The commands of the string's converter. */
export const stringCommands: CommandMap = {
  model: 'STRING-6',
  fields: [
    { name: 'voltageSetpoint', header: 'SOURce:VOLTage', decimals: 2, writeRange: voltageRange },
    {
      name: 'heartbeat',
      header: 'SYSTem:HEARtbeat',
      decimals: 0,
      writeRange: [0, 65_535],
      isOfController: true,
    },
    { name: 'voltage', header: 'MEASure:VOLTage', decimals: 3 },
    { name: 'current', header: 'MEASure:CURRent', decimals: 4 },
    { name: 'power', header: 'MEASure:POWer', decimals: 2 },
    { name: 'irradiance', header: 'MEASure:IRRadiance', decimals: 1 },
    { name: 'cellTemp', header: 'MEASure:TEMPerature', decimals: 2 },
    { name: 'running', header: 'OUTPut:STATe', decimals: 0, isOfController: true },
    { name: 'watchdogFlag', header: 'SYSTem:WATChdog', decimals: 0, isOfController: true },
    { name: 'watchdogCount', header: 'SYSTem:WATChdog:COUNt', decimals: 0, isOfController: true },
  ],
};
