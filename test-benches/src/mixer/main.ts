import { runBench } from '../kit/run-bench.js';
import { mixerBench } from './mixer-bench.js';

await runBench(mixerBench);
