import { plantLagAt, plantLagRad } from './choose-dithers.js';
import type { LawMargins, LawPrediction } from './law-size.types.js';
import type { SizedLoops } from './size-loops.js';
import type { CheckedDemands, CheckedPlant } from './sizing-plant.schema.js';

/** Relative standard error of a curvature above which it is called badly known. */
const doubtMax = 0.25;
/** Slowest rate over fastest below which one direction is called a ridge. */
const ridgeShare = 0.1;

export interface RemarkCase {
  lawId: string;
  plant: CheckedPlant;
  demands: CheckedDemands;
  /** Null for laws that try points. */
  sized: SizedLoops | null;
  predicted: LawPrediction;
  margins: LawMargins;
}

/** What cannot be kept or is badly known, with what to do. */
export function remarksOn(known: RemarkCase): string[] {
  return [...plantRemarks(known), ...driftRemarks(known), ...lawRemarks(known)];
}

function plantRemarks({ plant, sized }: RemarkCase): string[] {
  const remarks: string[] = [];
  const [first] = sized?.axes ?? [];
  const lagRad = first ? plantLagAt(first.loop.plant, first.loop.omegaRadPerS) : 0;
  if (lagRad > 0 && lagRad < 0.5 * plantLagRad && first?.limitedBy !== 'ripple') {
    remarks.push('The scan, not the plant, keeps the dither slow: scan faster to converge sooner.');
  }
  if (lagRad > Math.PI / 2) {
    remarks.push(
      'The ripple is faster than the plant: what it shows of the slope is small. Inject a slower sine.',
    );
  }
  (plant.curvatureErrors ?? []).forEach((error, i) => {
    const share = error / plant.curvature[i]![i]!;
    if (share > doubtMax) {
      remarks.push(
        `The curvature of actuator ${i + 1} is known to ±${Math.round(100 * share)} % only, the rate with it: survey more finely or for longer.`,
      );
    }
  });
  return remarks;
}

function driftRemarks({ demands, predicted }: RemarkCase): string[] {
  if (predicted.driftLoss === null || predicted.driftLoss <= demands.lossAllowed) return [];
  return [
    'The best point drifts faster than the estimate can follow at the allowed loss: allow more, or quieten the objective.',
  ];
}

function lawRemarks({ lawId, plant, sized, margins }: RemarkCase): string[] {
  const remarks: string[] = [];
  if (sized && lawId !== 'newton' && sized.slowest < ridgeShare) {
    remarks.push(
      `One direction converges at ${sized.slowest > 0 ? (100 * sized.slowest).toPrecision(2) : 0} % of the rate: Newton's law goes at one rate everywhere.`,
    );
  }
  if (lawId === 'constrained' && plant.actuators.every(({ constraintSlope }) => constraintSlope === 0)) {
    remarks.push(
      'The slope of the constrained quantity is not known, so that the reserve leaves no room for the dither: set it.',
    );
  }
  if (lawId === 'discrete' && margins.plantOverDither < Infinity) {
    remarks.push(
      'The plant lags, which this law does not look for: its phase is made up for, but the gradient law is the better choice.',
    );
  }
  return remarks;
}
