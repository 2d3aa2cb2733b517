import type { Benchmark } from './benchmark.types.js';
import { engineScan } from './engine-scan.benchmark.js';
import { lawSteps } from './law-step/law-step.benchmark.js';
import { modbusReads } from './modbus-read/modbus-read.benchmark.js';
import { objectiveStep } from './objective-step.benchmark.js';
import { rtuRead } from './rtu-read/rtu-read.benchmark.js';
import { stopLatency } from './stop-latency/stop-latency.benchmark.js';
import { scanLoop } from './scan-loop.benchmark.js';

/** Every benchmark that `npm run bench` knows. */
export const benchmarks: readonly Benchmark[] = [
  scanLoop,
  engineScan,
  objectiveStep,
  ...lawSteps,
  ...modbusReads,
  rtuRead,
  stopLatency,
];
