import { gradientLaw, type GradientLawParameters } from '@cresthold/shared';
import { efficiencyOf } from '../burner-physics.js';
import { BurnerSimulation } from '../burner-simulation.js';
import { burnerSeeking, seekForS, seekStartPct } from './burner-experiment.js';

const scanS = 0.05;
/** Bench seconds per real second, as the demonstration runs it. */
const speed = 5;

export interface SeekCourse {
  /** True efficiency below the true best in each scan, points. */
  shortfalls: number[];
  /** Estimate less true best trim in each scan, %. */
  errors: number[];
  /** Measured objective in each scan, %. */
  objectives: number[];
}

/**
 * Seeks on the drifting, noisy burner as a rig host does, once a scan: read on the wire's grid, decide, write.
 *
 * @param warmUpS real time before the seek begins, so that the drift stands elsewhere
 */
export function seekOnBurner(seed: number, warmUpS: number): SeekCourse {
  const simulation = new BurnerSimulation({ seed, isNoisy: true, isDrifting: true });
  let scans = 0;
  const scan = (trimPct: number): number => {
    simulation.write('airTrim', onGrid(trimPct, 0.01));
    simulation.write('heartbeat', (scans += 1) & 0xffff);
    simulation.advanceTo(scans * scanS * speed);
    return measuredEfficiency(simulation);
  };
  let objective = NaN;
  for (let i = 0; i < warmUpS / scanS; i += 1) objective = scan(seekStartPct);

  const law = gradientLaw.init(lawParameters(), [seekStartPct]);
  const course: SeekCourse = { shortfalls: [], errors: [], objectives: [] };
  for (let i = 0; i < seekForS / scanS; i += 1) {
    gradientLaw.step(law, { objective, isValid: true }, scanS);
    const [estimate = NaN] = law.estimate;
    const [dither = NaN] = law.dither;
    objective = scan(estimate + dither);
    const { loss, bestTrim } = simulation.truth;
    course.shortfalls.push(loss ?? NaN);
    course.errors.push(estimate - bestTrim);
    course.objectives.push(objective);
  }
  return course;
}

function lawParameters(): GradientLawParameters {
  const { ditherAmplitude: amplitude, ditherPeriodS, phaseDeg, min, max, gain, ...filters } = burnerSeeking;
  return {
    axes: [
      {
        // The box of the step is that of the estimate, the box of a law that of all it asks for.
        min: min - amplitude,
        max: max + amplitude,
        amplitude,
        periodS: ditherPeriodS,
        phaseRad: (phaseDeg * Math.PI) / 180,
        dither: 'sine',
        gain,
        speedMax: null,
      },
    ],
    washoutRatio: filters.washoutRatio,
    lowPassRatio: filters.lowPassRatio,
    taper: null,
  };
}

function measuredEfficiency(burner: BurnerSimulation): number {
  const gas = {
    o2Pct: onGrid(burner.read('o2'), 0.01),
    coPpm: Math.fround(burner.read('co')),
    flueTempC: onGrid(burner.read('flueTemp'), 0.1),
  };
  return efficiencyOf(gas, onGrid(burner.read('airTemp'), 0.1));
}

function onGrid(value: number, quantum: number): number {
  return Math.round(value / quantum) * quantum;
}

/** The last two minutes of bench time of a seek. */
export function lastTwoBenchMinutes<T>(perScan: T[]): T[] {
  return perScan.slice(-Math.round(120 / speed / scanS));
}

export const mean = (values: number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;
