import {
  createFirstOrderFilter,
  resetFirstOrderFilter,
  stepLowPass,
  stepWashout,
  type FirstOrderFilterState,
} from '../signals/first-order-filter.js';
import type { PeriodicAxis } from './law-parameters.js';
import { isUsable } from './usable-number.js';

/** Corner of the lock-in on the plant's own ripple, as a fraction of its frequency. */
const lockInRatio = 0.05;
/** Keeps the square from deciding by rounding where the sine passes zero, rad. */
const edgeRad = 1e-9;

/** Dither of one actuator and what it is demodulated with. */
export interface AxisDither {
  readonly axis: PeriodicAxis;
  readonly isSine: boolean;
  readonly amplitude: number;
  /** Lag of the demodulation φ, rad. */
  readonly phaseRad: number;
  readonly omega: number;
  /** Corner of the washout that the objective goes through; 0 for none, rad/s. */
  readonly washoutCorner: number;
  /** Phase of the dither that was put out last, rad. */
  phase: number;
  /** Share of the amplitude of the dither that was put out last. */
  scale: number;
  /** Lock-in on the measured actuator: washout as on the objective, parts in phase and in quadrature. */
  readonly washout: FirstOrderFilterState;
  readonly sine: FirstOrderFilterState;
  readonly cosine: FirstOrderFilterState;
}

/** @param washoutRatio corner of the objective's washout, of the dither frequency; 0 for none */
export function createAxisDither(axis: PeriodicAxis, washoutRatio = 0): AxisDither {
  const omega = (2 * Math.PI) / axis.periodS;
  return {
    axis,
    isSine: axis.dither === 'sine',
    amplitude: axis.amplitude,
    phaseRad: axis.phaseRad,
    omega,
    washoutCorner: washoutRatio * omega,
    phase: 0,
    scale: 1,
    washout: createFirstOrderFilter(),
    sine: createFirstOrderFilter(),
    cosine: createFirstOrderFilter(),
  };
}

export function resetAxisDither(dither: AxisDither): void {
  dither.phase = 0;
  dither.scale = 1;
  resetFirstOrderFilter(dither.washout);
  resetFirstOrderFilter(dither.sine);
  resetFirstOrderFilter(dither.cosine);
}

/**
 * Follows amplitude and phase of the ripple on the measured actuator by a lock-in: products with sine and cosine
 * of the nominal frequency, low-passed. The actuator goes through a washout of the same corner as the objective,
 * so that the washout needs no phase compensation; what is left to compensate is the plant. A true frequency
 * that is off by Δω turns the phase and is followed with an error of about Δω over the corner of the low-pass.
 *
 * @realtime safe: allocates nothing
 */
export function listen(dither: AxisDither, measured: number, dtS: number): void {
  const { washoutCorner } = dither;
  const ripple = washoutCorner > 0 ? stepWashout(dither.washout, measured, washoutCorner, dtS) : measured;
  const corner = lockInRatio * dither.omega;
  stepLowPass(dither.sine, 2 * ripple * Math.sin(dither.phase), corner, dtS);
  stepLowPass(dither.cosine, 2 * ripple * Math.cos(dither.phase), corner, dtS);
}

/** @returns true where the dither can be demodulated with: injected, or measured by a usable value */
export function canListen(dither: AxisDither, measured: number | undefined): boolean {
  return dither.axis.dither !== 'measured' || isUsable(measured);
}

/**
 * What the objective is multiplied with so that the mean of the product is its slope (times the answer of plant
 * and washout): (2/a)·sin(ωt − φ) for a sine, ±1/a for a square, the lock-in's sine for measured ripple; 0 where
 * the ripple is too small to work with.
 *
 * @returns 1 / actuator unit
 * @realtime safe: allocates nothing
 */
export function demodulator(dither: AxisDither): number {
  const { amplitude, phaseRad } = dither;
  if (dither.isSine) return (2 / (amplitude * dither.scale)) * Math.sin(dither.phase - phaseRad);
  if (dither.axis.dither === 'square') {
    return squareOf(dither.phase - phaseRad) / (amplitude * dither.scale);
  }
  const square = rippleSquared(dither);
  return square < amplitude * amplitude ? 0 : (2 / square) * laggedRipple(dither);
}

/** Writes the demodulator of each dither, 1 / actuator unit; for injected sines without a call. */
export function writeDemodulators(dithers: readonly AxisDither[], demodulators: Float64Array): void {
  for (let i = 0; i < dithers.length; i += 1) {
    const d = dithers[i] as AxisDither;
    demodulators[i] = d.isSine
      ? (2 / (d.amplitude * d.scale)) * Math.sin(d.phase - d.phaseRad)
      : demodulator(d);
  }
}

/** Writes the dithers as the objective answers them, lagging by φ, actuator units. */
export function writeLaggedDithers(dithers: readonly AxisDither[], lagged: Float64Array): void {
  for (let i = 0; i < dithers.length; i += 1) {
    const d = dithers[i] as AxisDither;
    lagged[i] = d.isSine ? d.amplitude * d.scale * Math.sin(d.phase - d.phaseRad) : laggedDither(d);
  }
}

/** Writes what is put out next, actuator units: nothing where the plant's own ripple is used. */
export function writeNextDithers(
  dithers: readonly AxisDither[],
  taper: { readonly scale: number },
  next: Float64Array,
  dtS: number,
): void {
  const { scale } = taper;
  for (let i = 0; i < dithers.length; i += 1) {
    const d = dithers[i] as AxisDither;
    d.phase = (d.phase + d.omega * dtS) % (2 * Math.PI);
    d.scale = scale;
    next[i] = d.isSine ? d.amplitude * scale * Math.sin(d.phase) : presentDither(d);
  }
}

/**
 * The dither as the objective answers it, lagging by φ.
 *
 * @returns actuator unit
 */
export function laggedDither(dither: AxisDither): number {
  const { amplitude, phaseRad, dither: kind } = dither.axis;
  if (kind === 'sine') return amplitude * dither.scale * Math.sin(dither.phase - phaseRad);
  if (kind === 'square') return amplitude * dither.scale * squareOf(dither.phase - phaseRad);
  return rippleSquared(dither) < amplitude * amplitude ? 0 : laggedRipple(dither);
}

/** @returns amplitude of the measured ripple squared, actuator unit² */
export function rippleSquared({ sine, cosine }: AxisDither): number {
  return sine.low * sine.low + cosine.low * cosine.low;
}

function laggedRipple({ axis, phase, sine, cosine }: AxisDither): number {
  return sine.low * Math.sin(phase - axis.phaseRad) + cosine.low * Math.cos(phase - axis.phaseRad);
}

function presentDither({ axis, amplitude, scale, phase }: AxisDither): number {
  return axis.dither === 'square' ? amplitude * scale * squareOf(phase) : 0;
}

function squareOf(phase: number): number {
  return Math.sin(phase + edgeRad) >= 0 ? 1 : -1;
}
