import type { PeakFit } from '../identification/fit-peak.js';
import type { SurfacePeakFit } from '../identification/fit-surface-peak.js';
import type { NoiseSpectrum } from '../identification/noise-colour.js';
import type { StepResponseFit } from '../identification/step-response.js';
import type { Estimate } from '../signals/estimate.js';
import type { SizingPlant } from './sizing-plant.schema.js';

/** What identification found. */
export interface PlantFindings {
  scanS: number;
  /** Step of one actuator, answered by the objective. */
  step: StepResponseFit;
  /** The hill (or hollow) of a survey over one actuator, or over two. */
  peak: Omit<PeakFit, 'points'> | SurfacePeakFit;
  /** Noise of the objective at rest; where not given, that about the step response, taken for white. */
  noise?: NoiseSpectrum;
  actuators: SizingPlant['actuators'];
}

/** A dead time counts where it is above so many standard errors. */
const certainErrors = 2;

/**
 * What identification found, as `sizeLaw` takes it. A time constant far below the scan is none; a dead time that
 * may as well be none is none. The noise is that of white noise as dense as the measured at the reference.
 *
 * @returns the plant, its curvature with the sign turned where it was that of a hill
 */
export function describePlant({ scanS, step, peak, noise, actuators }: PlantFindings): SizingPlant {
  const { timeConstantS, deadTimeS } = step;
  const { curvature, curvatureErrors } = curvatureOf(peak);
  return {
    scanS,
    timeConstantsS: timeConstantS.value > scanS / 10 ? [timeConstantS.value] : [],
    deadTimeS: isCertain(deadTimeS) ? deadTimeS.value : 0,
    noise: noise
      ? {
          sigma: Math.sqrt(noise.density.value / (2 * scanS)),
          slope: noise.colour === 'white' ? 0 : noise.slope.value,
          referenceHz: noise.referenceHz,
        }
      : { sigma: step.noise },
    curvature,
    curvatureErrors,
    actuators,
  };
}

const isCertain = ({ value, standardError }: Estimate): boolean => value > certainErrors * standardError;

/** Second derivatives, with a diagonal above zero. */
function curvatureOf(peak: PlantFindings['peak']): { curvature: number[][]; curvatureErrors: number[] } {
  if ('curvature' in peak) {
    return { curvature: [[Math.abs(peak.curvature.value)]], curvatureErrors: [peak.curvature.standardError] };
  }
  const { xx, xy, yy } = peak.hessian;
  const sign = Math.sign(xx.value);
  return {
    curvature: [
      [sign * xx.value, sign * xy.value],
      [sign * xy.value, sign * yy.value],
    ],
    curvatureErrors: [xx.standardError, yy.standardError],
  };
}
