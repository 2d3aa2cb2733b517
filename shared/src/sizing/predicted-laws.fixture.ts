import { seekingLaws, type SeekingLawId } from '../seeking/seeking-laws.js';
import type { SeekingInput, SeekingLaw, SeekingState } from '../seeking/seeking-law.js';
import { PlantCourse } from './identify-plant.fixture.js';
import { lossAllowed, plantOf } from './sized-laws.cases.fixture.js';
import { sizeLaw } from './size-law.js';
import type { LawSize } from './law-size.types.js';

interface Seek {
  size: LawSize;
  path: number[][];
  /** Mean loss after four times of convergence, objective unit. */
  endLoss: number;
}

function seekOnce(
  lawId: SeekingLawId,
  at: { shape: number; tau: number; noise: number },
  side: number,
  seed: number,
): Seek {
  const plant = { ...plantOf(at.shape, at.tau, at.noise), best: at.shape === 0 ? [0] : [0, 0] };
  const { scanS, curvature } = plant;
  const size: LawSize = sizeLaw(
    lawId,
    {
      scanS,
      timeConstantsS: at.tau > 0 ? [at.tau] : [],
      noise: { sigma: at.noise },
      curvature,
      // A drift, however slow, keeps the gain of simultaneous perturbation from fading.
      actuators: curvature.map(() => ({ min: -50, max: 50, driftPerS: 1e-12 })),
    },
    { lossAllowed },
  );
  // The slow direction of the coupled shape lies across.
  const start = size.amplitudes.map((amplitude, i) => side * 3 * amplitude * (i === 0 ? 1 : -1));
  const parameters = lawId === 'spsa' ? { ...size.parameters, seed } : size.parameters;
  const law = seekingLaws[lawId] as unknown as SeekingLaw<object, SeekingState>;
  const state = law.init(parameters, start);
  const course = new PlantCourse(plant, seed, start);
  const input: SeekingInput = { objective: 0, isValid: true, constraint: -1e6, bound: 0 };
  const [path, applied] = [[] as number[][], [...start]];
  const scans = Math.ceil((size.predicted.convergenceS ?? 50 * size.ditherPeriodsS[0]!) / scanS);
  let loss = 0;
  for (let i = 0; i < 12 * scans; i += 1) {
    input.objective = course.scan(applied);
    law.step(state, input, scanS);
    for (let k = 0; k < applied.length; k += 1) applied[k] = state.estimate[k]! + state.dither[k]!;
    if (i < 3 * scans)
      path.push(Array.from(state.estimate, (value, k) => (side * value) / size.amplitudes[k]!));
    if (i >= 4 * scans) loss -= course.valueAt(applied);
  }
  return { size, path, endLoss: loss / (8 * scans) };
}

/** Simulated over predicted time to a tenth of the distance, without noise; half the difference of both sides. */
export function convergenceRatio(lawId: SeekingLawId, shape: number, tau: number): number {
  const seeds = lawId === 'spsa' ? 20 : 1;
  const runs = Array.from({ length: seeds }, (_, seed) =>
    [1, -1].map((side) => seekOnce(lawId, { shape, tau, noise: 0 }, side, seed + 1)),
  ).flat();
  const { size, path } = runs[0]!;
  const distanceAt = (i: number) =>
    Math.hypot(...path[i]!.map((_, k) => runs.reduce((sum, run) => sum + run.path[i]![k]!, 0) / runs.length));
  const target = 0.3 * Math.sqrt(path[0]!.length);
  const at = path.findIndex((_, i) => distanceAt(i) < target);
  return ((at + 1) * 0.1) / size.predicted.convergenceS!;
}

/** Simulated over predicted loss, ripple and noise together. */
export function lossRatio(
  lawId: SeekingLawId,
  shape: number,
  tau: number,
  noise: number,
  seeds: number,
): number {
  const runs = Array.from({ length: seeds }, (_, seed) =>
    seekOnce(lawId, { shape, tau, noise }, 1, seed + 1),
  );
  const { rippleLoss, noiseLoss } = runs[0]!.size.predicted;
  return runs.reduce((sum, { endLoss }) => sum + endLoss, 0) / seeds / (rippleLoss + (noiseLoss ?? 0));
}
