import { runBench } from '../kit/run-bench.js';
import { burnerBench } from './burner-bench.js';

await runBench(burnerBench);
