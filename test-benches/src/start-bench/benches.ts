import { burnerBench } from '../burner/burner-bench.js';
import type { BenchDefinition } from '../kit/bench-definition.js';

/** All benches; each has its program at `dist/NAME/main.js`. */
export const benches: readonly BenchDefinition[] = [burnerBench];
