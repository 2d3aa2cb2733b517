import {
  seekingLaws,
  sizeLaw,
  type LawSize,
  type SeekingLaw,
  type SeekingLawId,
  type SeekingState,
} from '@cresthold/shared';
import { BenchDrive } from './bench-drive.js';
import { identifyBench, type IdentifiedBench } from './identify-bench.js';
import type { SizedBench } from './sized-bench.js';

export interface SizedBenchSeek {
  identified: IdentifiedBench;
  size: LawSize;
  /** Mean loss of the bench's truth over the second half of the seek, unit of the objective. */
  endLoss: number;
}

/** Where the seek begins, dither amplitudes beside the best of the survey. */
const startAmplitudes = 3;
/** Times of convergence that it is given; half of them are judged. */
const seekTimes = 8;
/** Trials of a law that predicts no time of convergence. */
const trials = 60;

/** Identifies a bench from its noisy instruments, sizes a law from that alone, and seeks. */
export function seekOnBench(bench: SizedBench, lawId: SeekingLawId, seed: number): SizedBenchSeek {
  const drive = new BenchDrive(bench, seed);
  const identified = identifyBench(bench, drive);
  const size: LawSize = sizeLaw(lawId, identified.plant, {
    lossAllowed: bench.lossAllowed,
    forbidden: [...(bench.forbidden ?? [])],
  });
  const start = identified.best.map((value, i) => {
    const { min, max } = bench.actuators[i] ?? { min: NaN, max: NaN };
    return Math.min(max, Math.max(min, value + startAmplitudes * (size.amplitudes[i] ?? NaN)));
  });
  drive.goTo(identified.best, start);
  const law = seekingLaws[lawId] as unknown as SeekingLaw<object, SeekingState>;
  const state = law.init(size.parameters, start);
  const timeS = size.predicted.convergenceS ?? (trials / seekTimes) * Math.max(...size.ditherPeriodsS);
  const scans = Math.ceil((seekTimes * timeS) / bench.scanS);
  let applied = start;
  let [loss, counted] = [0, 0];
  for (let i = 0; i < scans; i += 1) {
    const objective = drive.scan(applied);
    const input = { objective, isValid: Number.isFinite(objective), constraint: -1e6, bound: 0 };
    law.step(state, input, bench.scanS);
    applied = Array.from(state.estimate, (value, k) => value + (state.dither[k] ?? NaN));
    const now = drive.model.truth.loss;
    if (i < scans / 2 || now === null) continue;
    loss += now;
    counted += 1;
  }
  return { identified, size, endLoss: loss / counted };
}
