import { hessianRatio, lowPassRatio, memoryPeriods, washoutRatio, type PeriodicLawId } from './loop-kinds.js';
import { speedShare, type AxisLoop, type SizedLoops } from './size-loops.js';
import type { CheckedDemands, CheckedPlant } from './sizing-plant.schema.js';

/** What a law with periodic dithers is sized from. */
export interface PeriodicCase {
  plant: CheckedPlant;
  demands: CheckedDemands;
  sized: SizedLoops;
  /** Rate of convergence along the fastest direction, 1/s. */
  rate: number;
  /** k_i of θ̂' = k_i·ξ_i, actuator unit² / (objective unit · s). */
  gains: number[];
}

export const periodOf = ({ loop }: AxisLoop): number => (2 * Math.PI) / loop.omegaRadPerS;
/** Smallest share of the slope that any actuator recovers. */
export const leastShare = ({ axes }: SizedLoops): number => Math.min(...axes.map(({ share }) => share));

/** Rate with which the surveyed curvature is corrected, of that of convergence: it is worth more than its estimate. */
const trust = 0.25;

/**
 * What is lost of the slope is made up for by the rate; the inverse follows no faster than noise permits.
 *
 * An error ε of the curvature, in units in which each actuator's own is 1, makes one of ε/λ of its inverse, with λ the
 * smallest eigenvalue in those units. Noise makes such errors, and so does what the law sees away from the best point:
 * the curvature there, shaken by its own motion. Their variance goes with the rate of the inverse, so that it must be
 * less by λ² on a ridge: there the survey's curvature is worth more than the law's.
 */
export function newtonRates(sized: SizedLoops, rate: number) {
  const smallest = sized.slowest > 0 ? sized.slowest * sized.coupling : 1;
  return {
    rate: rate / leastShare(sized),
    inverseRate: Math.min(trust * rate, inverseRateByNoise(sized)) * smallest ** 2,
    hessianRatio,
  };
}

/** What the parts of all axes have in common. */
function axesOf(
  { plant, demands, sized }: PeriodicCase,
  own: (axis: AxisLoop, i: number) => object,
): object[] {
  return sized.axes.map((axis, i) => ({
    min: plant.actuators[i]!.min,
    max: plant.actuators[i]!.max,
    amplitude: axis.amplitude,
    periodS: periodOf(axis),
    phaseRad: turned(axis.loop.phaseRad),
    dither: demands.dither,
    speedMax: speedShare * axis.amplitude * axis.loop.omegaRadPerS,
    ...own(axis, i),
  }));
}

const turned = (phaseRad: number): number => phaseRad - 2 * Math.PI * Math.round(phaseRad / (2 * Math.PI));

const climbing = (known: PeriodicCase) => ({
  axes: axesOf(known, (_, i) => ({ gain: known.gains[i] })),
  washoutRatio,
  lowPassRatio,
});

/** What each law's schema takes, its defaults left out. */
export const periodicParameters: Record<PeriodicLawId, (known: PeriodicCase) => object> = {
  gradient: climbing,

  slope: (known) => ({
    ...climbing(known),
    axes: axesOf(known, ({ share }, i) => ({
      gain: known.gains[i],
      slope: known.demands.slopes[i] ?? 0,
      slopeShare: Math.min(1, share),
    })),
  }),

  constrained: (known) => ({
    ...climbing(known),
    side: known.demands.side,
    approachRate: known.rate,
    reserve: reserveOf(known),
  }),

  newton: (known) => ({
    axes: axesOf(known, ({ curvature, amplitude, loop }) => ({
      curvature,
      speedMax: (amplitude * loop.omegaRadPerS) / (2 * Math.PI),
      dither: 'sine',
    })),
    ...newtonRates(known.sized, known.rate),
    crossCurvatures: known.plant.curvature.slice(1).map((row, i) => row.slice(0, i + 1)),
    washoutRatio,
    lowPassRatio,
    lag: lagOf(known.plant),
  }),

  discrete: (known) => {
    const { scanS, washoutRadPerS } = known.sized.axes[0]!.loop;
    const x = (washoutRadPerS * scanS) / 2;
    return {
      axes: axesOf(known, (axis, i) => ({
        scansPerPeriod: periodOf(axis) / scanS,
        gain: known.gains[i]! * scanS,
      })),
      washoutPole: -(1 - x) / (1 + x),
    };
  },

  'least-squares': (known) => ({
    axes: axesOf(known, (_, i) => ({ gain: known.gains[i] })),
    memoryPeriods,
  }),

  'bounded-rate': (known) => ({ axes: axesOf(known, (_, i) => ({ gain: known.gains[i] })) }),
};

/** What is kept of the bound for the wandering of the estimate, of the ripple. */
const wanderShare = 0.25;

function reserveOf({ plant, sized }: PeriodicCase): number {
  const { lowPassRadPerS, scanS } = sized.axes[0]!.loop;
  const ripple = sized.axes.reduce(
    (sum, { amplitude }, i) => sum + Math.abs(plant.actuators[i]!.constraintSlope) * amplitude,
    0,
  );
  return (1 + wanderShare) * ripple + 2 * plant.constraintNoise * Math.sqrt((scanS * lowPassRadPerS) / 2);
}

/** Rate at which noise scatters a second derivative by a fifth of it. */
function inverseRateByNoise({ axes }: SizedLoops): number {
  const each = axes.map(({ curvature, amplitude, noise, loop }) => {
    const scatter = (4 * noise) / (curvature * amplitude ** 2);
    return 0.04 / (scatter * scatter * loop.scanS);
  });
  return Math.min(...each);
}

/** The longest time constant, and the others as dead time. */
function lagOf({ timeConstantsS, deadTimeS }: CheckedPlant): object {
  const longest = Math.max(0, ...timeConstantsS);
  const all = timeConstantsS.reduce((sum, tau) => sum + tau, 0);
  return { timeConstantS: longest, deadTimeS: deadTimeS + all - longest };
}
