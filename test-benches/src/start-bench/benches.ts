import { burnerBench } from '../burner/burner-bench.js';
import { couplingBench } from '../coupling/coupling-bench.js';
import type { BenchDefinition } from '../kit/bench-definition.js';
import { matcherBench } from '../matcher/matcher-bench.js';
import { mixerBench } from '../mixer/mixer-bench.js';
import { pulserBench } from '../pulser/pulser-bench.js';
import { stringBench } from '../string/string-bench.js';

/** All benches; each has its program at `dist/NAME/main.js`. */
export const benches: readonly BenchDefinition[] = [
  burnerBench,
  stringBench,
  couplingBench,
  matcherBench,
  pulserBench,
  mixerBench,
];
