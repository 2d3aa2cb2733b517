/**
 * Repeatable noise for tests.
 *
 * @source uniform: D. Blackman and S. Vigna (2021), "Scrambled linear pseudorandom number generators", ACM
 * Transactions on Mathematical Software 47(4), xoshiro128**; normal: G. E. P. Box and M. E. Muller (1958),
 * Annals of Mathematical Statistics 29:610–611
 */
export class SeededNoise {
  private readonly state: Int32Array;

  constructor(seed: number) {
    this.state = Int32Array.from({ length: 4 }, (_, i) => Math.imul(seed * 4 + i + 1, 0x9e3779b1) ^ (i + 1));
    for (let i = 0; i < 30; i += 1) this.uniform();
  }

  /** Above 0, below 1. */
  uniform(): number {
    const s = this.state;
    const scrambled = Math.imul(rotate(Math.imul(s[1]!, 5), 7), 9);
    const shifted = s[1]! << 9;
    s[2]! ^= s[0]!;
    s[3]! ^= s[1]!;
    s[1]! ^= s[2]!;
    s[0]! ^= s[3]!;
    s[2]! ^= shifted;
    s[3] = rotate(s[3]!, 11);
    return ((scrambled >>> 0) + 0.5) / 2 ** 32;
  }

  normal(): number {
    return Math.sqrt(-2 * Math.log(this.uniform())) * Math.cos(2 * Math.PI * this.uniform());
  }

  normals(count: number, scale = 1): number[] {
    return Array.from({ length: count }, () => scale * this.normal());
  }

  /** x_k = φ·x_(k−1) + e_k with variance 1, begun in its steady state. */
  autoregressive(count: number, phi: number): number[] {
    const scale = Math.sqrt(1 - phi * phi);
    let value = this.normal();
    return Array.from({ length: count }, () => (value = phi * value + scale * this.normal()));
  }

  /**
   * Noise whose density falls as 1/f^slope, by an autoregression of `memory` terms.
   *
   * @source N. J. Kasdin (1995), "Discrete simulation of colored noise", Proceedings of the IEEE 83:802–827,
   * eq. 116
   */
  coloured(count: number, slope: number, memory = count): number[] {
    const weights = [1];
    for (let k = 1; k <= memory; k += 1) weights.push((weights[k - 1]! * (k - 1 - slope / 2)) / k);
    const values: number[] = [];
    for (let n = 0; n < count; n += 1) {
      let value = this.normal();
      for (let k = 1; k <= Math.min(n, memory); k += 1) value -= weights[k]! * values[n - k]!;
      values.push(value);
    }
    return values;
  }
}

function rotate(bits: number, by: number): number {
  return (bits << by) | (bits >>> (32 - by));
}
