/**
 * An L network that makes a load of few ohms look like the 50 Ω of its generator: a capacitor across the
 * generator's side, then a coil and a second capacitor in series with the load. Lossless, at one frequency. The
 * pure map from the two capacitances to what is reflected: no time, no motors, no noise.
 */

/** A complex number: impedance in Ω, admittance in S, or a reflection coefficient. */
export interface Complex {
  readonly re: number;
  readonly im: number;
}

/** What the network is built of. */
export const network = {
  /** Impedance of generator and line, Ω. */
  lineOhm: 50,
  /** Industrial frequency of radio-frequency generators, Hz (ITU Radio Regulations, 5.150). */
  frequencyHz: 13.56e6,
  /** Coil in the series arm, H. */
  coilH: 1.6e-6,
  /** Capacitor across the generator's side: at 0 % and at 100 % of its travel, F. */
  shuntF: [300e-12, 2300e-12],
  /** Capacitor in the series arm, F. */
  seriesF: [100e-12, 300e-12],
} as const;

/** The load about which the bench wanders, Ω. */
export const nominalLoad: Complex = { re: 2, im: -60 };

const omega = 2 * Math.PI * network.frequencyHz;

/** An L network between two resistances: its quality factor and the reactances of its two arms, Ω. */
export interface LNetwork {
  readonly q: number;
  /** In series with the lower resistance. */
  readonly seriesOhm: number;
  /** Across the higher resistance. */
  readonly shuntOhm: number;
}

/**
 * Matches two resistances: Q = sqrt(Rhigh/Rlow − 1), Xseries = Q·Rlow, Xshunt = Rhigh/Q.
 *
 * @param highOhm the higher resistance, Ω
 * @param lowOhm the lower resistance, Ω, above 0
 * @source C. Bowick (1982), RF Circuit Design, chapter 4 (from memory)
 * @example lNetwork(1000, 100).q // 3
 */
export function lNetwork(highOhm: number, lowOhm: number): LNetwork {
  const q = Math.sqrt(highOhm / lowOhm - 1);
  return { q, seriesOhm: q * lowOhm, shuntOhm: highOhm / q };
}

/**
 * Reflection coefficient of an impedance on a line: Γ = (Z − Z0) / (Z + Z0).
 *
 * @source any text on transmission lines, e.g. D. M. Pozar (2012), Microwave Engineering, section 2.3
 */
export function reflection(z: Complex, lineOhm: number): Complex {
  return divide({ re: z.re - lineOhm, im: z.im }, { re: z.re + lineOhm, im: z.im });
}

/** Standing wave ratio of a reflection: (1 + |Γ|) / (1 − |Γ|). */
export function standingWaveRatio(magnitude: number): number {
  return (1 + magnitude) / (1 - magnitude);
}

/** |Γ| of a standing wave ratio. */
export function magnitudeOfRatio(ratio: number): number {
  return (ratio - 1) / (ratio + 1);
}

/** Return loss, dB: how far what comes back lies below what went out. */
export function returnLossDb(magnitude: number): number {
  return -20 * Math.log10(magnitude);
}

/** Mismatch loss, dB: what the load gets less for it. */
export function mismatchLossDb(magnitude: number): number {
  return -10 * Math.log10(1 - magnitude ** 2);
}

/** Capacitance at a place of its travel, F; linear, as vacuum capacitors nearly are. @param pct 0 to 100 */
export function capacitance([atZero, atFull]: readonly [number, number], pct: number): number {
  return atZero + ((atFull - atZero) * pct) / 100;
}

/** Where the two capacitors are, % of their travel. */
export interface Tuning {
  readonly shuntPct: number;
  readonly seriesPct: number;
}

/** Reflection coefficient that the generator sees. */
export function reflectionAt({ shuntPct, seriesPct }: Tuning, load: Complex): Complex {
  const seriesX = omega * network.coilH - 1 / (omega * capacitance(network.seriesF, seriesPct));
  const arm = divide({ re: 1, im: 0 }, { re: load.re, im: load.im + seriesX });
  const shuntB = omega * capacitance(network.shuntF, shuntPct);
  const z = divide({ re: 1, im: 0 }, { re: arm.re, im: arm.im + shuntB });
  return reflection(z, network.lineOhm);
}

/** Share of the forward power that comes back, 0 to 1. */
export function reflectedShare(tuning: Tuning, load: Complex): number {
  const { re, im } = reflectionAt(tuning, load);
  return re * re + im * im;
}

/**
 * The tuning that reflects nothing, in closed form from the L network between the line and the load's
 * resistance; its coil is the series arm's reactance as a whole, so that the load's own and the coil's come off.
 *
 * @param load its resistance below that of the line
 */
export function bestTuning(load: Complex): Tuning {
  const { seriesOhm, shuntOhm } = lNetwork(network.lineOhm, load.re);
  const seriesC = 1 / (omega * (omega * network.coilH + load.im - seriesOhm));
  const shuntC = 1 / (omega * shuntOhm);
  return { shuntPct: placeOf(network.shuntF, shuntC), seriesPct: placeOf(network.seriesF, seriesC) };
}

function placeOf([atZero, atFull]: readonly [number, number], farads: number): number {
  return (100 * (farads - atZero)) / (atFull - atZero);
}

function divide(a: Complex, b: Complex): Complex {
  const size = b.re * b.re + b.im * b.im;
  return { re: (a.re * b.re + a.im * b.im) / size, im: (a.im * b.re - a.re * b.im) / size };
}
