import type { BenchDefinition } from '../kit/bench-definition.js';
import { MatcherModel } from './matcher-model.js';
import { matcherRegisters } from './matcher-registers.js';

/** The matching network as a bench. */
export const matcherBench: BenchDefinition<MatcherModel> = {
  name: 'matcher',
  title: 'Impedance matching network with two capacitors',
  wire: { kind: 'modbus-tcp', registers: matcherRegisters },
  speed: 5,
  nanValue: 'reflected',
  makeModel: (settings) => new MatcherModel(settings),
};
