/**
 * A Q-switched laser: the medium stores what the lamp pumps while the switch keeps the cavity closed; the switch
 * opens, a pulse builds up from noise and takes the stored energy out. Point rate equations, normalised: time in
 * lifetimes of the open cavity, inversion in its threshold, so that the light grows by (inversion − loss) and the
 * inversion is used up by (inversion · light). No time beyond one pulse, no noise.
 */

/** How the switch opens: the loss falls in a straight line from `closedLoss` to 1 within `opening` lifetimes. */
export interface Opening {
  readonly opening: number;
  readonly closedLoss: number;
}

/** Of the bench: slow beside the build-up, so that much gain breaks the pulse. */
export const benchOpening: Opening = { opening: 80, closedLoss: 5 };
/** A switch that opens at once, as the closed forms have it. */
export const suddenOpening: Opening = { opening: 0, closedLoss: 1 };

/** Light that the noise begins with, in the unit in which an emptied threshold is 1. */
const seedLight = 1e-9;
/** Step of the integration, lifetimes; the sharpest pulses are some lifetimes wide. */
const dt = 0.25;

/**
 * The share of the inversion that a pulse takes where the switch opens at once: the η above 0 that solves
 * 1 − η = exp(−r·η).
 *
 * @param r inversion at the opening over threshold, above 1
 * @source A. E. Siegman (1986), Lasers, section 26.2; W. G. Wagner and B. A. Lengyel (1963), J. Appl. Phys. 34:2040
 * @example extraction(2) // 0.7968
 */
export function extraction(r: number): number {
  let eta = 1;
  for (let i = 0; i < 200; i += 1) eta = 1 - Math.exp(-r * eta);
  return eta;
}

/** Greatest power of such a pulse, in emptied thresholds per lifetime: r − 1 − ln r (same sources). */
export function suddenPeakPower(r: number): number {
  return r - 1 - Math.log(r);
}

/** Loss of the cavity at a time after the switch began to open. */
export function lossAt(time: number, { opening, closedLoss }: Opening): number {
  return time >= opening ? 1 : 1 + (closedLoss - 1) * (1 - time / opening);
}

/**
 * One pulse. What leaves is all that the cavity loses: the switch turns out by polarisation what it does not let
 * round.
 *
 * @param r inversion at the opening over threshold
 * @param every lifetimes between two points; a multiple of 0.25
 * @param into gets the power at each point, in emptied thresholds per lifetime
 */
export function fillPulse(r: number, opening: Opening, every: number, into: Float64Array): void {
  const stepsPerPoint = Math.round(every / dt);
  let [n, light] = [r, seedLight];
  for (let point = 0; point < into.length; point += 1) {
    for (let step = 0; step < stepsPerPoint; step += 1) {
      const time = (point * stepsPerPoint + step) * dt;
      const mid = lossAt(time + dt / 2, opening);
      // A fourth-order step of dn/dt = −n·light, dlight/dt = (n − loss)·light; spelled out, since it runs often.
      const [a, b] = [-n * light, (n - lossAt(time, opening)) * light];
      const [n1, light1] = [n + (dt / 2) * a, light + (dt / 2) * b];
      const [c, d] = [-n1 * light1, (n1 - mid) * light1];
      const [n2, light2] = [n + (dt / 2) * c, light + (dt / 2) * d];
      const [e, f] = [-n2 * light2, (n2 - mid) * light2];
      const [n3, light3] = [n + dt * e, light + dt * f];
      const [g, h] = [-n3 * light3, (n3 - lossAt(time + dt, opening)) * light3];
      n += (dt / 6) * (a + 2 * c + 2 * e + g);
      light = Math.max(seedLight, light + (dt / 6) * (b + 2 * d + 2 * f + h));
    }
    into[point] = light * lossAt((point + 1) * stepsPerPoint * dt, opening);
  }
}

/** What one pulse carries, in emptied thresholds. */
export interface PulseEnergies {
  /** All of it. */
  readonly total: number;
  /** Within `mainReach` of its highest peak. */
  readonly main: number;
}

/** How far about its peak the main pulse reaches, lifetimes. */
export const mainReach = 10;

/** @param every lifetimes between two points */
export function pulseEnergies(points: Float64Array, every: number): PulseEnergies {
  let top = 0;
  points.forEach((power, i) => {
    if (power > (points[top] ?? 0)) top = i;
  });
  const reach = Math.round(mainReach / every);
  let [total, main] = [0, 0];
  points.forEach((power, i) => {
    total += power * every;
    if (Math.abs(i - top) <= reach) main += power * every;
  });
  return { total, main };
}
