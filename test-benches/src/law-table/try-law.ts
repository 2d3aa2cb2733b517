import { amplitude, scanS, type TableLaw } from './table-laws.js';
import { PlantCourse, type TablePlant } from './table-plants.js';

/** Time that each law is given, s. */
export const triedForS = 400;
/** The last part of it, over which the end is judged, s. */
const judgedForS = 60;
/** Distance from the best point that counts as converged, in dither amplitudes. */
const bandAmplitudes = 3;

export interface Trial {
  isConverged: boolean;
  /** Time after which the mean of the estimate stayed within the band, s; NaN if it did not. */
  convergedAfterS: number;
  /** Mean loss of the objective against the best point over the end; NaN where it was never valid. */
  finalLoss: number;
  /** Loss that the dither alone costs at the best point: Σ f''·a²/4 for a sine, twice that for a square. */
  rippleLoss: number;
  /** Largest distance of what was asked for from the best point after convergence, or at all. */
  worstExcursion: number;
  /** Share of the time with an objective that was not valid. */
  invalidShare: number;
}

/** Lets a law seek on a plant in virtual time, noise seeded. */
export function tryLaw(entry: TableLaw, plant: TablePlant, seed: number): Trial {
  const { law } = entry;
  const state = law.init(entry.parameters(plant), plant.start);
  const course = new PlantCourse(plant, seed);
  const applied = [...plant.start];
  const input = { objective: NaN, isValid: true, measured: applied, constraint: NaN, bound: 1 };
  const trial = new TrialRecord(plant, entry.rippleFactor);
  for (let i = 1; i * scanS <= triedForS; i += 1) {
    const tS = i * scanS;
    input.objective = course.answer(applied, tS, scanS);
    input.isValid = Number.isFinite(input.objective);
    input.constraint = applied[0] ?? NaN;
    law.step(state, input, scanS);
    trial.note(applied, state.estimate, input.isValid, tS);
    for (let k = 0; k < applied.length; k += 1)
      applied[k] = (state.estimate[k] ?? NaN) + (state.dither[k] ?? NaN);
  }
  return trial.result();
}

const distance = (x: ArrayLike<number>, best: readonly number[]) =>
  Math.hypot(...best.map((value, k) => (x[k] ?? NaN) - value));

class TrialRecord {
  private lastOutsideS = 0;
  private readonly losses: number[] = [];
  private invalid = 0;
  private scans = 0;
  private readonly distances: number[] = [];

  constructor(
    private readonly plant: TablePlant,
    private readonly rippleFactor: number,
  ) {}

  note(applied: readonly number[], estimate: Float64Array, isValid: boolean, tS: number): void {
    const best = this.plant.best(tS);
    this.scans += 1;
    if (!isValid) this.invalid += 1;
    if (distance(estimate, best) > bandAmplitudes * amplitude) this.lastOutsideS = tS;
    this.distances.push(distance(applied, best));
    if (tS > triedForS - judgedForS) this.losses.push(-this.plant.value(applied, tS));
  }

  result(): Trial {
    const isConverged = this.lastOutsideS < triedForS - judgedForS;
    const valid = this.losses.filter(Number.isFinite);
    const from = isConverged ? Math.ceil(this.lastOutsideS / scanS) : 0;
    const sineLoss = this.plant.curvature.reduce((sum, f2) => sum + (f2 * amplitude ** 2) / 4, 0);
    return {
      isConverged,
      convergedAfterS: isConverged ? this.lastOutsideS : NaN,
      finalLoss: valid.reduce((sum, loss) => sum + loss, 0) / valid.length,
      rippleLoss: this.rippleFactor * sineLoss,
      worstExcursion: this.distances.slice(from).reduce((worst, value) => Math.max(worst, value), 0),
      invalidShare: this.invalid / this.scans,
    };
  }
}
