/** A source of numbers that repeats itself for the same seed. */
export interface SeededRandom {
  /** Even in [0, 1). */
  uniform(): number;
  /** Gaussian, mean 0, standard deviation 1. */
  normal(): number;
}

/**
 * Counter-based 32-bit generator: a Weyl sequence whose terms are mixed by the finaliser of MurmurHash3
 * (A. Appleby, public domain; constants from memory). Period 2^32, good enough for sensor noise.
 * Gaussian numbers by the polar method of G. Marsaglia and T. A. Bray (1964), SIAM Review 6:260–264.
 *
 * @param seed any integer
 */
export function seededRandom(seed: number): SeededRandom {
  let counter = seed >>> 0;
  let spare: number | null = null;

  const uniform = (): number => {
    counter = (counter + 0x9e3779b9) >>> 0;
    let x = counter;
    x = Math.imul(x ^ (x >>> 16), 0x85ebca6b);
    x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35);
    return ((x ^ (x >>> 16)) >>> 0) / 4_294_967_296;
  };

  const normal = (): number => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const u = 2 * uniform() - 1;
      const v = 2 * uniform() - 1;
      const s = u * u + v * v;
      if (s === 0 || s >= 1) continue;
      const scale = Math.sqrt((-2 * Math.log(s)) / s);
      spare = v * scale;
      return u * scale;
    }
  };

  return { uniform, normal };
}
