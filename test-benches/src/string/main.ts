import { runBench } from '../kit/run-bench.js';
import { stringBench } from './string-bench.js';

await runBench(stringBench);
