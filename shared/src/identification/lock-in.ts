import { checkSettings } from '../signals/check-settings.js';
import { noEstimate, type Estimate } from '../signals/estimate.js';

/** value = offset + inPhase·sin(ωt) + quadrature·cos(ωt) = offset + amplitude·sin(ωt + phaseRad). */
export interface LockInReading {
  inPhase: Estimate;
  quadrature: Estimate;
  amplitude: Estimate;
  /** −π to π; its standard error holds where it is small, below about 0.3. */
  phaseRad: Estimate;
  offset: Estimate;
  /** Standard deviation of what is no part of the sine. */
  noise: number;
}

/**
 * Amplitude and phase of a channel at a known frequency, over whole periods: the least-squares fit of a sine, since
 * sine, cosine and a constant are orthogonal there. A reading is ready after every `periods` periods.
 *
 * The standard errors √(2/n)·noise (of the phase: over the amplitude) hold for independent noise.
 *
 * @source J. H. Scofield (1994), "Frequency-domain description of a lock-in amplifier", American J. of Physics
 * 62:129–133; standard errors: IEEE Std 1057, three-parameter sine fit
 * @realtime `add` is safe: constant time; allocates only when a reading becomes ready
 */
export class LockIn {
  private readonly total: number;
  private readonly sine: Float64Array;
  private count = 0;
  private reference = 0;
  private sum = 0;
  private squares = 0;
  private sines = 0;
  private cosines = 0;
  private latest: LockInReading | null = null;

  /**
   * @param samplesPerPeriod 3 or more
   * @param periods whole periods in a reading, 1 or more
   * @throws analysis.invalid-input
   */
  constructor(
    private readonly samplesPerPeriod: number,
    periods: number,
  ) {
    checkSettings(
      [
        Number.isInteger(samplesPerPeriod) && samplesPerPeriod >= 3,
        'samplesPerPeriod',
        'must be a whole number from 3.',
      ],
      [Number.isInteger(periods) && periods >= 1, 'periods', 'must be a whole number from 1.'],
    );
    this.total = samplesPerPeriod * periods;
    this.sine = Float64Array.from({ length: samplesPerPeriod }, (_, i) =>
      Math.sin((2 * Math.PI * i) / samplesPerPeriod),
    );
  }

  /** The newest reading; null before the first. */
  get reading(): LockInReading | null {
    return this.latest;
  }

  /**
   * Takes the next sample; phase 0 of the reference is at the first one. A sample that is no finite number
   * throws the unfinished reading away, because the rest would no longer be whole periods; the next begins with
   * the sample after it.
   *
   * @returns true where a reading became ready
   */
  add(value: number): boolean {
    if (!Number.isFinite(value)) {
      this.restart();
      return false;
    }
    // About its first value a reading loses no digits to a large offset.
    if (this.count === 0) this.reference = value;
    const deviation = value - this.reference;
    const at = this.count % this.samplesPerPeriod;
    this.sum += deviation;
    this.squares += deviation * deviation;
    this.sines += deviation * this.sine[at]!;
    this.cosines += deviation * Math.cos((2 * Math.PI * at) / this.samplesPerPeriod);
    this.count += 1;
    if (this.count < this.total) return false;
    this.latest = this.read();
    this.restart();
    return true;
  }

  private restart(): void {
    [this.count, this.sum, this.squares, this.sines, this.cosines] = [0, 0, 0, 0, 0];
  }

  private read(): LockInReading {
    const n = this.total;
    const [mean, x, y] = [this.sum / n, (2 * this.sines) / n, (2 * this.cosines) / n];
    const rest = this.squares - n * mean * mean - (n / 2) * (x * x + y * y);
    const noise = n > 3 ? Math.sqrt(Math.max(rest, 0) / (n - 3)) : NaN;
    const error = noise * Math.sqrt(2 / n);
    const amplitude = Math.hypot(x, y);
    const phaseRad = { value: Math.atan2(y, x), standardError: error / amplitude };
    return {
      inPhase: { value: x, standardError: error },
      quadrature: { value: y, standardError: error },
      amplitude: { value: amplitude, standardError: error },
      phaseRad: amplitude > 0 ? phaseRad : noEstimate(),
      offset: { value: this.reference + mean, standardError: noise / Math.sqrt(n) },
      noise,
    };
  }
}
