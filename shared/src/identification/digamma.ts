/**
 * Derivative of ln Γ at x > 0: mean of the logarithm of a unit-scale gamma variable.
 *
 * @source M. Abramowitz and I. A. Stegun (1964), 6.3.5 and 6.3.18
 */
export function digamma(x: number): number {
  if (x < 8) return digamma(x + 1) - 1 / x;
  const s = 1 / (x * x);
  return Math.log(x) - 1 / (2 * x) - s * (1 / 12 - s * (1 / 120 - s * (1 / 252 - s / 240)));
}

/**
 * Derivative of `digamma` at x > 0: variance of that logarithm.
 *
 * @source M. Abramowitz and I. A. Stegun (1964), 6.4.6 and 6.4.12
 */
export function trigamma(x: number): number {
  if (x < 8) return trigamma(x + 1) + 1 / (x * x);
  const s = 1 / (x * x);
  return (1 / x) * (1 + 1 / (2 * x) + s * (1 / 6 - s * (1 / 30 - s * (1 / 42 - s / 30))));
}
