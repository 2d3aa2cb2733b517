import type { BenchDefinition } from '../kit/bench-definition.js';
import { burnerRegisters } from './burner-registers.js';
import { BurnerSimulation } from './burner-simulation.js';

/** The burner as a bench. */
export const burnerBench: BenchDefinition<BurnerSimulation> = {
  name: 'burner',
  title: 'Gas burner with an air damper',
  wire: { kind: 'modbus-tcp', registers: burnerRegisters },
  speed: 5,
  nanValue: 'co',
  makeModel: (settings) => new BurnerSimulation(settings),
};
