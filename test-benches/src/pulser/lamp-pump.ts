/** The lamp: a flash whose energy gathers in the medium, which loses it again by fluorescence. Times in µs. */
export const lamp = {
  /** Lifetime of the upper level of Nd:YAG, µs (textbook value, from memory). */
  fluorescenceUs: 230,
  /** Standard deviation and middle of the flash at half drive, µs. */
  flashUs: 60,
  middleUs: 200,
  /** The flash comes later with more drive, µs per %. */
  laterUsPerPct: 0.8,
} as const;

const stepUs = 0.5;
const spanUs = 1000;

/**
 * Inversion over the time since the flash was fired, as share of its greatest: dn/dt = flash − n/τ.
 *
 * @returns one value every half µs for a flash at half drive
 */
function pumped(): Float64Array {
  const inversion = new Float64Array(spanUs / stepUs);
  const decay = Math.exp(-stepUs / lamp.fluorescenceUs);
  for (let i = 1; i < inversion.length; i += 1) {
    const z = ((i - 0.5) * stepUs - lamp.middleUs) / lamp.flashUs;
    inversion[i] = (inversion[i - 1] ?? 0) * decay + Math.exp((-z * z) / 2) * stepUs * Math.sqrt(decay);
  }
  const most = Math.max(...inversion);
  return inversion.map((value) => value / most);
}

const inversionAt = pumped();

/** The delay after which most is stored at half drive, µs. */
export const bestDelayUs = inversionAt.indexOf(1) * stepUs;

/** How much later the flash comes than at half drive, µs. */
export function flashShiftUs(drivePct: number): number {
  return lamp.laterUsPerPct * (drivePct - 50);
}

/** Share of the greatest inversion at a delay after a flash at half drive, 0 to 1. */
export function storedShare(delayUs: number): number {
  const place = Math.min(Math.max(delayUs / stepUs, 0), inversionAt.length - 1);
  const below = Math.floor(place);
  const [low = 0, high = low] = [inversionAt[below], inversionAt[below + 1]];
  return low + (place - below) * (high - low);
}
