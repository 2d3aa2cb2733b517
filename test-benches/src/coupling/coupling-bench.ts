import type { BenchDefinition } from '../kit/bench-definition.js';
import { CouplingModel } from './coupling-model.js';
import { couplingRegisters } from './coupling-registers.js';

/** The fibre coupling as a program and behind any face. */
export const couplingBench: BenchDefinition<CouplingModel> = {
  name: 'coupling',
  title: 'Two-axis fibre coupling on piezo stages',
  wire: { kind: 'modbus-rtu', registers: couplingRegisters },
  speed: 1,
  nanValue: 'powerDbm',
  ownFaults: [
    {
      name: 'bump',
      what: 'somebody knocks against the mount: the best place jumps by 9 to 13 µm, once',
      begin: (model) => model.bump(),
    },
  ],
  makeModel: (settings) => new CouplingModel(settings),
};
