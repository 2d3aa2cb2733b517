import { runBench } from '../kit/run-bench.js';
import { pulserBench } from './pulser-bench.js';

await runBench(pulserBench);
