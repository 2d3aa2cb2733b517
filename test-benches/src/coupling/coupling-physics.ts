/**
 * How much light goes into a single-mode fibre: overlap of Gaussian modes, and of what comes through a round
 * aperture with a central obscuration, whose far field has rings. Pure; lengths in µm, transmissions 0 to 1.
 */

/**
 * Two equal modes, sideways apart: exp(−d²/w²).
 *
 * @param offsetUm d
 * @param modeRadiusUm w, where the field has fallen to 1/e
 * @source D. Marcuse (1977), "Loss analysis of single-mode fiber splices", Bell System Technical Journal 56:703–718
 * @example offsetTransmission(0.47985 * 5.2, 5.2) // 0.7943, a loss of 1 dB
 */
export function offsetTransmission(offsetUm: number, modeRadiusUm: number): number {
  return Math.exp(-((offsetUm / modeRadiusUm) ** 2));
}

/**
 * Two equal modes, tilted against each other: exp(−(π·n·w·θ/λ)²).
 *
 * @source Marcuse (1977), as above
 */
export function tiltTransmission(
  tiltRad: number,
  modeRadiusUm: number,
  wavelengthUm: number,
  index: number,
): number {
  return Math.exp(-(((Math.PI * index * modeRadiusUm * tiltRad) / wavelengthUm) ** 2));
}

/**
 * Two modes of different radius on one axis: (2·w1·w2 / (w1² + w2²))².
 *
 * @source Marcuse (1977), as above
 */
export function mismatchTransmission(radiusUm: number, otherRadiusUm: number): number {
  return ((2 * radiusUm * otherRadiusUm) / (radiusUm ** 2 + otherRadiusUm ** 2)) ** 2;
}

/** Loss in dB of a transmission; above 0. */
export const lossDb = (transmission: number): number => -10 * Math.log10(transmission);

const besselPoints = 64;

/**
 * Bessel function J0, by its integral over a full turn, mean of cos(x·sin φ): the sum over even steps is exact to
 * rounding for |x| up to 40.
 */
export function besselJ0(x: number): number {
  let sum = 0;
  for (let i = 0; i < besselPoints; i += 1)
    sum += Math.cos(x * Math.sin((Math.PI * (i + 0.5)) / besselPoints));
  return sum / besselPoints;
}

/** Aperture in front of the fibre, seen from the fibre's mode that is thrown back onto it. */
export interface Aperture {
  /** β: radius of the aperture over that of the mode. */
  fill: number;
  /** Radius of the central obscuration over that of the aperture, 0 for none. */
  obscuration: number;
  /** Radius of the aperture over that of the beam that lights it; 0 for even light. */
  taper: number;
}

const pupilIntervals = 120;

/** Simpson's rule from `from` to 1. */
function integrate(from: number, f: (x: number) => number): number {
  const h = (1 - from) / pupilIntervals;
  let sum = f(from) + f(1);
  for (let i = 1; i < pupilIntervals; i += 1) sum += (i % 2 === 1 ? 4 : 2) * f(from + i * h);
  return (sum * h) / 3;
}

/**
 * Field that an aperture couples into a fibre which stands aside by d = `offset` mode radii; squared it is the
 * transmission of the light that comes through the aperture. Negative on every other ring.
 *
 * A fibre that stands aside by d sees the aperture's field with a phase which grows across it; averaged round the
 * turn that is J0(2·β·ρ·d/w) at the radius ρ, and the mode itself is exp(−β²·ρ²) there.
 *
 * @source overlap of modes in the aperture: S. Shaklan and F. Roddier (1988), "Coupling starlight into single-mode
 * fiber optics", Applied Optics 27:2334–2338 (from memory)
 */
export function coupledField({ fill, obscuration, taper }: Aperture, offset: number): number {
  const overlap = integrate(
    obscuration,
    (rho) => Math.exp(-(fill ** 2 + taper ** 2) * rho ** 2) * besselJ0(2 * fill * rho * offset) * rho,
  );
  const lightPower = integrate(obscuration, (rho) => Math.exp(-2 * taper ** 2 * rho ** 2) * rho);
  // All of the fibre's mode: the integral of exp(−2β²ρ²)·ρ from 0 to infinity.
  const modePower = 1 / (4 * fill ** 2);
  return overlap / Math.sqrt(lightPower * modePower);
}

/** Radius of the fibre's mode at 1550 nm, µm. */
export const modeRadiusUm = 5.2;

/** The aperture of the bench: rings of −14.1 and −20.3 dB round a peak of −4.7 dB. */
export const benchAperture: Aperture = { fill: 1, obscuration: 0.6, taper: 0 };

const tableStep = 0.02;
const tableEnd = 8;
let table: Float64Array | undefined;

/**
 * Transmission of the bench at a distance from its best place, by a table of the field that is made once.
 *
 * @param offsetUm 0 or above; as at 8 mode radii beyond that
 */
export function benchTransmission(offsetUm: number): number {
  table ??= Float64Array.from({ length: Math.round(tableEnd / tableStep) + 2 }, (_, i) =>
    coupledField(benchAperture, i * tableStep),
  );
  const place = Math.min(offsetUm / modeRadiusUm, tableEnd) / tableStep;
  const index = Math.floor(place);
  const [low = 0, high = 0] = [table[index], table[index + 1]];
  return (low + (place - index) * (high - low)) ** 2;
}
