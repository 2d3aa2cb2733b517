/**
 * Place of the greatest value of a function with one peak between two bounds.
 *
 * @param tolerance how closely, in the unit of the argument
 * @source J. Kiefer (1953), Sequential minimax search for a maximum, Proc. AMS 4:502
 */
export function goldenSection(f: (x: number) => number, low: number, high: number, tolerance = 1e-7): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let [a, b] = [low, high];
  while (b - a > tolerance) {
    const left = b - ratio * (b - a);
    const right = a + ratio * (b - a);
    if (f(left) > f(right)) b = right;
    else a = left;
  }
  return (a + b) / 2;
}
