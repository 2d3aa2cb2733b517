import { runBench } from '../kit/run-bench.js';
import { matcherBench } from './matcher-bench.js';

await runBench(matcherBench);
