import { sizeAmplitude, type AmplitudeBound } from '../dither/dither-amplitude.js';
import type { DitherLaw } from '../dither/dither-lines.js';
import { lagAtDither, recoveredSlope, washoutAtDither, type AveragedLoop } from './averaged-loop.js';
import { chooseDithers, fastestDither } from './choose-dithers.js';
import { noiseAt, type CheckedDemands, type CheckedPlant } from './sizing-plant.schema.js';
import { symmetricEigen } from './symmetric-eigen.js';

/** Adaptation is at least so many times slower than the dither, and than the low-pass (which swings at 4). */
export const ditherOverAdaptationMin = 12;
export const lowPassOverAdaptationMin = 8;
/** Lines of several dithers lie at least so many times the rate of adaptation apart. */
const apartOverAdaptationMin = 4;
/** Of the greatest speed of the dither: a faster estimate shakes the objective more than the dither does. */
export const speedShare = 0.25;
/** Share of the allowed loss that noise may add. */
export const noiseShare = 0.25;

/** How a law filters and demodulates, as far as sizing goes. */
export interface LoopKind {
  dithers: DitherLaw;
  /** Corners over the dither frequency; a washout of 0 is none, a low-pass of null is none. */
  washoutRatio: number;
  lowPassRatio: number | null;
  /** True where all actuators share the filters of the slowest dither. */
  isShared: boolean;
  /** False where the law cannot make up for the lag. */
  canLag: boolean;
  /** Mean loss of the dither over that of a sine. */
  lossFactor: number;
}

/** One actuator's dither and what becomes of it. */
export interface AxisLoop {
  loop: AveragedLoop;
  amplitude: number;
  limitedBy: AmplitudeBound | 'ripple';
  /** Share of the slope that is recovered, ρ. */
  share: number;
  /** White noise that is as dense as the objective's at the dither, behind the washout, objective unit. */
  noise: number;
  curvature: number;
}

export interface SizedLoops {
  axes: AxisLoop[];
  apartRadPerS: number;
  /** Eigenvalues of the curvature scaled to a diagonal of ones: largest, and smallest over largest. */
  coupling: number;
  slowest: number;
  /** The most by the time scales alone, 1/s. */
  byTimeScales: number;
}

/**
 * Dithers, amplitudes, phases and shares of all actuators. Frequencies: `chooseDithers`. Amplitudes: the largest
 * whose losses f_ii·a_i²/4 add up to what is allowed, each actuator taking the same part. Phase: that of plant
 * and washout at the dither.
 */
export function sizeLoops(plant: CheckedPlant, demands: CheckedDemands, kind: LoopKind): SizedLoops {
  const isMeasured = demands.dither === 'measured';
  const dynamics = { timeConstantsS: plant.timeConstantsS, deadTimeS: plant.deadTimeS };
  const chosen = isMeasured
    ? ripplesOf(plant)
    : chooseDithers({
        actuators: plant.actuators.length,
        law: kind.dithers,
        scanS: plant.scanS,
        fastestRadPerS: fastestDither(dynamics, plant.scanS),
        forbidden: demands.forbidden,
      });
  const slowest = Math.min(...chosen.omegas);
  const axes = chosen.omegas.map((omega, i) =>
    axisLoop(plant, demands, kind, { omega, filters: kind.isShared ? slowest : omega }, i),
  );
  const corners = axes.map(({ loop }) =>
    Math.min(loop.omegaRadPerS / ditherOverAdaptationMin, loop.lowPassRadPerS / lowPassOverAdaptationMin),
  );
  const byTimeScales = Math.min(...corners, chosen.apartRadPerS / apartOverAdaptationMin);
  return { axes, apartRadPerS: chosen.apartRadPerS, ...couplingOf(plant.curvature), byTimeScales };
}

function axisLoop(
  plant: CheckedPlant,
  demands: CheckedDemands,
  kind: LoopKind,
  { omega, filters }: { omega: number; filters: number },
  i: number,
): AxisLoop {
  const curvature = plant.curvature[i]![i]!;
  const { lowPassRatio, canLag } = kind;
  // The reference to the plant's own ripple goes through the same washout, which so falls out.
  const washoutRatio = demands.dither === 'measured' ? 0 : kind.washoutRatio;
  const loop: AveragedLoop = {
    plant: { timeConstantsS: plant.timeConstantsS, deadTimeS: plant.deadTimeS },
    scanS: plant.scanS,
    omegaRadPerS: omega,
    washoutRadPerS: washoutRatio * filters,
    lowPassRadPerS: lowPassRatio === null ? Infinity : lowPassRatio * filters,
    phaseRad: 0,
    loopRate: 0,
  };
  if (canLag) loop.phaseRad = lagAtDither(loop);
  const { amplitude, limitedBy } = amplitudeOf(plant, demands, kind, omega, i);
  return {
    loop,
    amplitude,
    limitedBy,
    share: recoveredSlope(loop),
    noise: noiseAt(plant, omega / (2 * Math.PI)) * washoutAtDither(loop),
    curvature,
  };
}

function amplitudeOf(
  plant: CheckedPlant,
  { dither, lossAllowed }: CheckedDemands,
  { lossFactor }: LoopKind,
  omega: number,
  i: number,
): Pick<AxisLoop, 'amplitude' | 'limitedBy'> {
  const { ripple, resolution, amplitudeMax, slewPerS, min, max } = plant.actuators[i]!;
  if (dither === 'measured' && ripple) return { amplitude: ripple.amplitude, limitedBy: 'ripple' };
  return sizeAmplitude({
    resolution,
    // Noise is paid for by the rate, not by the amplitude.
    noise: 0,
    scansAveraged: 1,
    slopeToSee: 1,
    amplitudeMax: Math.min(amplitudeMax ?? Infinity, (max - min) / 2),
    slewPerS: slewPerS ?? Infinity,
    periodS: (2 * Math.PI) / omega,
    curvature: plant.curvature[i]![i]! * lossFactor,
    lossAllowed: lossAllowed / plant.actuators.length,
  });
}

/** Ripples lie where the plant has them; the closest two give the distance. */
function ripplesOf({ actuators }: CheckedPlant): { omegas: number[]; apartRadPerS: number } {
  const omegas = actuators.map(({ ripple }) => (2 * Math.PI) / (ripple?.periodS ?? NaN));
  const sorted = [...omegas].sort((a, b) => a - b);
  const gaps = sorted.slice(1).map((omega, i) => omega - sorted[i]!);
  return { omegas, apartRadPerS: Math.min(Infinity, ...gaps) };
}

/** Spread of the curvature once every actuator is measured in units that make its own curvature 1. */
export function couplingOf(curvature: readonly (readonly number[])[]): { coupling: number; slowest: number } {
  const scaled = curvature.map((row, i) =>
    row.map((value, j) => value / Math.sqrt(row[i]! * curvature[j]![j]!)),
  );
  const { values } = symmetricEigen(scaled);
  const coupling = values[0]!;
  return { coupling, slowest: values[values.length - 1]! / coupling };
}
