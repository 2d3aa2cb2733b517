/** How the plant behind the map answers: lags in a row and a dead time. */
export interface PlantDynamics {
  /** Time constants, s; empty for a plant that answers at once. */
  timeConstantsS: readonly number[];
  deadTimeS: number;
}

export interface Complex {
  re: number;
  im: number;
}

export const complex = (re: number, im: number): Complex => ({ re, im });
export const times = (a: Complex, b: Complex): Complex =>
  complex(a.re * b.re - a.im * b.im, a.re * b.im + a.im * b.re);
export function over(a: Complex, b: Complex): Complex {
  const square = b.re * b.re + b.im * b.im;
  return complex((a.re * b.re + a.im * b.im) / square, (a.im * b.re - a.re * b.im) / square);
}
const exponential = ({ re, im }: Complex): Complex =>
  complex(Math.exp(re) * Math.cos(im), Math.exp(re) * Math.sin(im));

/**
 * Answer of plant and washout at s, sampled as a scan samples them: the actuator holds its value until the next
 * scan, where the objective is read. The first lag is then α/(1 − (1 − α)e^{−s·dt}) with α = 1 − e^{−dt/τ}, exactly;
 * further lags are taken as continuous, and the washout as the bilinear rule makes it.
 *
 * @param s complex frequency, rad/s
 * @param washoutRadPerS corner of the washout; 0 for none
 */
export function sampledAnswer(
  plant: PlantDynamics,
  washoutRadPerS: number,
  scanS: number,
  s: Complex,
): Complex {
  const [first, ...others] = plant.timeConstantsS;
  const back = exponential(complex(-s.re * scanS, -s.im * scanS));
  let answer = exponential(complex(-s.re * plant.deadTimeS, -s.im * plant.deadTimeS));
  if (first !== undefined && first > 0) {
    const kept = Math.exp(-scanS / first);
    answer = times(answer, over(complex(1 - kept, 0), complex(1 - kept * back.re, -kept * back.im)));
  }
  for (const tau of others) answer = over(answer, complex(1 + s.re * tau, s.im * tau));
  // s as the bilinear rule sees it: (2/dt)·(1 − z⁻¹)/(1 + z⁻¹).
  const seen = over(complex(1 - back.re, -back.im), complex(1 + back.re, back.im));
  const washed = complex((seen.re * 2) / scanS, (seen.im * 2) / scanS);
  if (washoutRadPerS > 0)
    answer = times(answer, over(washed, complex(washed.re + washoutRadPerS, washed.im)));
  return answer;
}

export const sizeOf = ({ re, im }: Complex): number => Math.hypot(re, im);
export const lagOf = ({ re, im }: Complex): number => -Math.atan2(im, re);
