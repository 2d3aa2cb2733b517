import { checkSettings } from '../signals/check-settings.js';

/** Above this the distribution is taken for that of this number, which is the normal one to 3·10⁻⁶. */
const freedomMax = 1e6;

/**
 * Quantile of Student's t: the value that a t-distributed number stays below with the given probability.
 *
 * @param probability above 0, below 1; 0.975 for a two-sided interval of 95 %
 * @param freedom degrees of freedom, above 0, not necessarily whole
 * @throws analysis.invalid-input
 * @source Student (1908), Biometrika 6:1–25; by inverting the incomplete beta function, M. Abramowitz and I. A.
 * Stegun (1964), 26.7.1
 * @example
 * studentQuantile(0.975, 1) // 12.706204736174707
 */
export function studentQuantile(probability: number, freedom: number): number {
  checkSettings(
    [probability > 0 && probability < 1, 'probability', 'must be above 0 and below 1.'],
    [freedom > 0, 'freedom', 'must be above 0.'],
  );
  if (probability < 0.5) return -studentQuantile(1 - probability, freedom);
  let low = 0;
  let high = 1;
  while (studentProbability(high, freedom) < probability && high < 1e300) [low, high] = [high, high * 4];
  for (let i = 0; i < 200 && high - low > 1e-14 * high; i += 1) {
    const middle = (low + high) / 2;
    if (studentProbability(middle, freedom) < probability) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/**
 * Probability that a t-distributed number is below the given one.
 *
 * @param freedom degrees of freedom, above 0
 */
export function studentProbability(t: number, freedom: number): number {
  const nu = Math.min(freedom, freedomMax);
  const square = t * t;
  // The smaller of the two arguments keeps the digits: near 0 the share of t², far out that of ν.
  const inside =
    square < nu
      ? incompleteBeta(square / (nu + square), 0.5, nu / 2)
      : 1 - incompleteBeta(nu / (nu + square), nu / 2, 0.5);
  return t >= 0 ? 0.5 + inside / 2 : 0.5 - inside / 2;
}

/** Regularised incomplete beta function I_x(a, b). @source Abramowitz and Stegun (1964), 26.5.8 and 26.5.2 */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const front = a * Math.log(x) + b * Math.log1p(-x) - logBeta(a, b);
  return (Math.exp(front) / a) * betaFraction(x, a, b);
}

/** 1/(1 + d₁/(1 + d₂/(1 + …))), from the front. @source W. J. Lentz (1976), Applied Optics 15:668–671 */
function betaFraction(x: number, a: number, b: number): number {
  const least = 1e-300;
  const kept = (value: number) => (Math.abs(value) < least ? least : value);
  let d = 1 / kept(1 - ((a + b) * x) / (a + 1));
  let c = 1;
  let fraction = d;
  for (let m = 1; m < 20_000; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    let change = 1;
    for (const term of [even, odd]) {
      d = 1 / kept(1 + term * d);
      c = kept(1 + term / c);
      change = c * d;
      fraction *= change;
    }
    if (Math.abs(change - 1) < 1e-15) break;
  }
  return fraction;
}

function logBeta(a: number, b: number): number {
  return logGamma(a) + logGamma(b) - logGamma(a + b);
}

/** @source Abramowitz and Stegun (1964), 6.1.41, carried up by 6.1.15 */
function logGamma(x: number): number {
  if (x < 12) return logGamma(x + 1) - Math.log(x);
  const s = 1 / (x * x);
  const series = (1 / 12 - s * (1 / 360 - s * (1 / 1260 - s * (1 / 1680 - s / 1188)))) / x;
  return (x - 0.5) * Math.log(x) - x + Math.log(2 * Math.PI) / 2 + series;
}
