import type { BenchDefinition } from '../kit/bench-definition.js';
import { PulserModel } from './pulser-model.js';
import { pulserRegisters } from './pulser-registers.js';

/** The pulsed laser as a bench. */
export const pulserBench: BenchDefinition<PulserModel> = {
  name: 'pulser',
  title: 'Q-switched laser with a trace of each pulse',
  wire: { kind: 'modbus-tcp', registers: pulserRegisters },
  speed: 5,
  nanValue: 'pulse',
  makeModel: (settings) => new PulserModel(settings),
};
