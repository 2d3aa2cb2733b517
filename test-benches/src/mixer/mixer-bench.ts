import type { BenchDefinition } from '../kit/bench-definition.js';
import { MixerModel } from './mixer-model.js';
import { mixerRegisters } from './mixer-registers.js';

/** The mixer as a program and behind any face. */
export const mixerBench: BenchDefinition<MixerModel> = {
  name: 'mixer',
  title: 'Four continuous cultures on one feed',
  wire: { kind: 'modbus-tcp', registers: mixerRegisters },
  speed: 5,
  nanValue: 'biomass',
  ownFaults: [
    {
      name: 'inhibit',
      what: 'something halves the growth in the second tank until it is over: another hill is the highest',
      begin: (model) => model.inhibit(true),
      end: (model) => model.inhibit(false),
    },
  ],
  makeModel: (settings) => new MixerModel(settings),
};
