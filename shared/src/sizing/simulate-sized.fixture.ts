import { gradientLaw } from '../seeking/gradient-law.js';
import type { SeekingInput } from '../seeking/seeking-law.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { sizeSeeking, type SeekingSize, type SizingRequest } from './size-seeking.js';

export interface SizedPlant {
  scanS: number;
  timeConstantS: number;
  noise: number;
  curvature: number;
  lossAllowed: number;
  driftPerS?: number;
}

export interface Simulated {
  size: SeekingSize;
  /** As the prediction defines them; the loss is that by dither and scatter together. */
  convergenceS: number;
  loss: number;
  estimateNoise: number;
  gradientNoise: number;
  /** Mean distance behind the best point, after convergence. */
  lag: number;
}

/** Where the estimate begins, in dither amplitudes on either side of the best point. */
const startAmplitudes = 3;
const seeds = 2;
/** Time constants of the loop over which the steady state is looked at, in each run. */
const steadyTimes = 60;

/** Runs the gradient law as it was sized on a first-order plant behind −½·f''·(θ − θ*)², with white noise. */
export function simulateSized(plant: SizedPlant): Simulated {
  const { timeConstantS, ...rest } = plant;
  const request: SizingRequest = { ...rest, timeConstantsS: [timeConstantS] };
  const size = sizeSeeking(request);
  // With the same noise from both sides half of the difference is the way, and the scatter falls out.
  const pairs = Array.from({ length: seeds }, (_, seed) =>
    [1, -1].map((side) => runOnce(plant, size, seed + 1, side * startAmplitudes * size.amplitude)),
  );
  const runs = pairs.flat();
  const mean = (of: (run: Run) => number) => runs.reduce((sum, run) => sum + of(run), 0) / runs.length;
  const wayAt = (i: number) =>
    pairs.reduce((sum, [above, below]) => sum + ((above?.path[i] ?? NaN) - (below?.path[i] ?? NaN)) / 2, 0) /
    seeds;
  const target = 0.1 * startAmplitudes * size.amplitude;
  const crossing = runs[0]?.path.findIndex((_, i) => Math.abs(wayAt(i)) < target) ?? -1;
  return {
    size,
    convergenceS: (crossing + 1) * plant.scanS,
    loss: mean((run) => run.loss),
    estimateNoise: Math.sqrt(mean((run) => run.variance)),
    gradientNoise: Math.sqrt(mean((run) => run.gradientVariance)),
    lag: mean((run) => run.lag),
  };
}

interface Run {
  path: number[];
  loss: number;
  variance: number;
  gradientVariance: number;
  lag: number;
}

function runOnce(plant: SizedPlant, size: SeekingSize, seed: number, start: number): Run {
  const { scanS, timeConstantS, noise, curvature, driftPerS = 0 } = plant;
  const { amplitude, periodS, gain, phaseRad, washoutRatio, lowPassRatio, predicted, margins, speedMax } =
    size;
  const random = new SeededNoise(seed);
  const box = 1e6 * amplitude;
  const law = gradientLaw.parametersSchema.parse({
    axes: [{ min: -box, max: box, amplitude, periodS, phaseRad, gain, speedMax }],
    washoutRatio,
    lowPassRatio,
  });
  const state = gradientLaw.init(law, [start]);
  const kept = Math.exp(-scanS / timeConstantS);
  const input: SeekingInput = { objective: 0, isValid: true };
  const rateS = (margins.ditherOverAdaptation * periodS) / (2 * Math.PI);
  const seekScans = Math.ceil((2 * predicted.convergenceS + 5 * rateS) / scanS);
  const steadyScans = Math.ceil((steadyTimes * rateS) / scanS);
  const path: number[] = [];
  const steady = new Steady();
  let [best, answer] = [0, -(curvature / 2) * start ** 2];
  for (let i = 0; i < seekScans + steadyScans; i += 1) {
    const distance = (state.estimate[0] ?? NaN) + (state.dither[0] ?? NaN) - best;
    const value = -(curvature / 2) * distance * distance;
    answer = kept * answer + (1 - kept) * value;
    input.objective = answer + noise * random.normal();
    gradientLaw.step(state, input, scanS);
    best += driftPerS * scanS;
    const error = (state.estimate[0] ?? NaN) - best;
    if (i < seekScans) path.push(error);
    else steady.add(error, -value, state.signals[3] ?? NaN);
  }
  return { path, ...steady.result() };
}

class Steady {
  private count = 0;
  private sums = { error: 0, square: 0, loss: 0, slope: 0, slopeSquare: 0 };

  add(error: number, loss: number, slope: number): void {
    this.count += 1;
    this.sums.error += error;
    this.sums.square += error * error;
    this.sums.loss += loss;
    this.sums.slope += slope;
    this.sums.slopeSquare += slope * slope;
  }

  result(): Omit<Run, 'path'> {
    const { error, square, loss, slope, slopeSquare } = this.sums;
    const n = this.count;
    return {
      loss: loss / n,
      variance: square / n,
      gradientVariance: slopeSquare / n - (slope / n) ** 2,
      lag: -error / n,
    };
  }
}
