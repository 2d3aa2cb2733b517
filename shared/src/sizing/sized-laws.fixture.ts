import { seekingLaws, type SeekingLawId } from '../seeking/seeking-laws.js';
import type { SeekingInput, SeekingLaw, SeekingState } from '../seeking/seeking-law.js';
import { identify, PlantCourse, type QuadraticPlant } from './identify-plant.fixture.js';
import type { LawSize } from './law-size.types.js';
import { sizeLaw } from './size-law.js';
import type { SizingDemands, SizingPlant } from './sizing-plant.schema.js';

export interface SizedSeek {
  size: LawSize;
  identified: SizingPlant;
  /** Mean loss over the last part of the seek, objective unit. */
  endLoss: number;
  /** Mean of the estimates over it. */
  endMean: number[];
  /** Time until the mean of a dither period stayed within three tenths of an amplitude, s; NaN if it did not. */
  endScans: number;
}

/** Times of convergence that a seek is given, and that its end is judged over. */
const seekTimes = 4;
const judgeTimes = 4;

/** Identify, size and seek, with nothing set by hand. */
export function identifySizeSeek(
  lawId: SeekingLawId,
  plant: QuadraticPlant,
  demands: SizingDemands,
  seed: number,
): SizedSeek {
  const identified = identify(plant, seed);
  const size: LawSize = sizeLaw(lawId, identified, demands);
  const start = size.amplitudes.map((amplitude, i) => plant.best[i]! + (i % 2 === 0 ? 4 : -3) * amplitude);
  const law = seekingLaws[lawId] as unknown as SeekingLaw<object, SeekingState>;
  const state = law.init(size.parameters, start);
  const course = new PlantCourse(plant, seed + 1000, start);
  const input: SeekingInput = { objective: 0, isValid: true, constraint: -1e6, bound: 0 };
  const timeS = size.predicted.convergenceS ?? 100 * Math.max(...size.ditherPeriodsS);
  const seekScans = Math.ceil((seekTimes * timeS) / plant.scanS);
  const endScans = Math.ceil((judgeTimes * timeS) / plant.scanS);
  const applied = [...start];
  const sums = applied.map(() => 0);
  let loss = 0;
  for (let i = 0; i < seekScans + endScans; i += 1) {
    input.objective = course.scan(applied);
    law.step(state, input, plant.scanS);
    for (let k = 0; k < applied.length; k += 1) applied[k] = state.estimate[k]! + state.dither[k]!;
    if (i < seekScans) continue;
    loss -= course.valueAt(applied);
    for (let k = 0; k < applied.length; k += 1) sums[k] = sums[k]! + state.estimate[k]!;
  }
  return { size, identified, endLoss: loss / endScans, endMean: sums.map((sum) => sum / endScans), endScans };
}
