/** What is larger is a fault and no measurement; it would overflow in products with itself. */
const magnitudeMax = 1e100;

/** @returns true for a number that a law can calculate with */
export function isUsable(value: number | undefined): value is number {
  return value !== undefined && value <= magnitudeMax && value >= -magnitudeMax;
}
