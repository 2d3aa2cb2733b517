import { runBench } from '../kit/run-bench.js';
import { couplingBench } from './coupling-bench.js';

await runBench(couplingBench);
