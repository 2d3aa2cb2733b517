import { type ReferencePiece, referenceFunctions, type ThermocoupleType } from './thermocouples.js';

/** Stops once a step changes the temperature by less than this, °C. */
const toleranceC = 1e-9;
/** Rounding that a voltage at the very end of a range is allowed, mV. */
const roundingMv = 1e-9;
/** A bisection needs 45 halvings for the widest range; Newton mostly four steps. */
const stepsMax = 60;

/** Range over which a type is read back, °C. Type B turns round at about 21 °C, so it begins at 50 °C. */
export function rangeOf(type: ThermocoupleType): { from: number; to: number } {
  const pieces = referenceFunctions[type];
  const from = type === 'B' ? 50 : (pieces[0]?.from ?? NaN);
  return { from, to: pieces.at(-1)?.to ?? NaN };
}

/**
 * Thermoelectric voltage against a junction at 0 °C.
 *
 * @param celsius temperature, °C
 * @returns mV; NaN outside the range of the reference function
 * @source NIST Monograph 175 (1993)
 * @realtime safe: allocates nothing
 * @example emfOf('K', 100) // 4.0962
 */
export function emfOf(type: ThermocoupleType, celsius: number): number {
  const piece = pieceAt(type, celsius);
  return piece ? emfIn(piece, celsius) : NaN;
}

/**
 * Temperature at which a thermocouple against 0 °C gives this voltage. It inverts the reference function itself
 * (Newton's steps kept inside a bisection), so it has no error of an inverse polynomial.
 *
 * @param emfMv voltage, mV
 * @returns °C; NaN outside the range
 * @realtime safe: allocates nothing
 * @example temperatureOf('K', 4.096) // 99.995
 */
export function temperatureOf(type: ThermocoupleType, emfMv: number): number {
  const pieces = referenceFunctions[type];
  const { from, to } = rangeOf(type);
  if (!(emfMv >= emfOf(type, from) - roundingMv)) return NaN;
  for (let index = 0; index < pieces.length; index += 1) {
    const piece = pieces[index];
    if (!piece) continue;
    const start = Math.max(piece.from, from);
    // Neighbouring pieces do not meet exactly: what falls between them belongs to the joint.
    if (emfMv <= emfIn(piece, start)) return start;
    if (emfMv <= emfIn(piece, piece.to)) return invert(piece, start, emfMv);
  }
  return emfMv <= emfOf(type, to) + roundingMv ? to : NaN;
}

function pieceAt(type: ThermocoupleType, celsius: number): ReferencePiece | null {
  const pieces = referenceFunctions[type];
  for (let index = 0; index < pieces.length; index += 1) {
    const piece = pieces[index];
    if (piece && celsius >= piece.from && celsius <= piece.to) return piece;
  }
  return null;
}

function emfIn({ coefficients, bell }: ReferencePiece, t: number): number {
  let sum = 0;
  for (let i = coefficients.length - 1; i >= 0; i -= 1) sum = sum * t + (coefficients[i] ?? 0);
  if (!bell) return sum;
  return sum + bell.height * Math.exp(bell.rate * (t - bell.centre) ** 2);
}

function slopeIn({ coefficients, bell }: ReferencePiece, t: number): number {
  let sum = 0;
  for (let i = coefficients.length - 1; i >= 1; i -= 1) sum = sum * t + i * (coefficients[i] ?? 0);
  if (!bell) return sum;
  const away = t - bell.centre;
  return sum + 2 * bell.rate * away * bell.height * Math.exp(bell.rate * away * away);
}

function invert(piece: ReferencePiece, from: number, emfMv: number): number {
  let low = from;
  let high = piece.to;
  let t = low + ((high - low) * (emfMv - emfIn(piece, low))) / (emfIn(piece, high) - emfIn(piece, low));
  for (let step = 0; step < stepsMax; step += 1) {
    const miss = emfIn(piece, t) - emfMv;
    if (miss > 0) high = t;
    else low = t;
    const newton = t - miss / slopeIn(piece, t);
    const next = newton > low && newton < high ? newton : (low + high) / 2;
    if (Math.abs(next - t) < toleranceC) return next;
    t = next;
  }
  return t;
}
