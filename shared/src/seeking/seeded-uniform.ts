/** A source of numbers that repeats itself for the same seed; its state is one counter. */
export interface SeededUniform {
  counter: number;
}

/** @param seed any integer */
export function createSeededUniform(seed: number): SeededUniform {
  return { counter: seed | 0 };
}

/**
 * Even in [0, 1): a Weyl sequence whose terms are mixed by the finaliser of MurmurHash3 (A. Appleby, public
 * domain; constants from memory). Period 2^32.
 *
 * @realtime safe: allocates nothing
 */
export function nextUniform(state: SeededUniform): number {
  return (nextBits(state) >>> 0) / 4_294_967_296;
}

/** +1 or −1, each as likely. */
export function nextSign(state: SeededUniform): number {
  return nextBits(state) < 0 ? 1 : -1;
}

/** 32 bits as a signed integer. */
function nextBits(state: SeededUniform): number {
  state.counter = (state.counter + 0x9e3779b9) | 0;
  let x = state.counter;
  x = Math.imul(x ^ (x >>> 16), 0x85ebca6b);
  x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35);
  return x ^ (x >>> 16);
}
