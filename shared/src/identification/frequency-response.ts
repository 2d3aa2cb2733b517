import { checkSeries, checkSettings } from '../signals/check-settings.js';
import type { Estimate } from '../signals/estimate.js';
import { LockIn } from './lock-in.js';

/** Answer of a channel to an actuator at one frequency. */
export interface FrequencyResponse {
  /** Output amplitude over input amplitude, channel unit per actuator unit. */
  gain: Estimate;
  /** Lead of the output, −π to π; a lag is negative. */
  phaseRad: Estimate;
  /** Share of the output's power that the input explains: 0 to 1. */
  coherence: number;
  /** Blocks of whole periods that were averaged. */
  blocks: number;
}

export interface SineTest {
  /** Actuator as applied, its unit. */
  inputs: ArrayLike<number>;
  /** Channel that answers, sampled with it. */
  outputs: ArrayLike<number>;
  /** Samples in a period of the sine; 3 or more. */
  samplesPerPeriod: number;
  /** Whole periods in a block; 1 where not given. Longer blocks make neighbours independent. */
  periodsPerBlock?: number;
}

type Phasor = readonly [re: number, im: number];

/**
 * Frequency response at one frequency by lock-in over blocks of whole periods, averaged as cross power over
 * input power; noise on the output only. Leave out the periods in which the plant settles. An unfinished block
 * at the end is not used.
 *
 * @throws analysis.invalid-input; analysis.too-little-data below two blocks
 * @source J. S. Bendat and A. G. Piersol (2010), "Random Data", 4th ed.: H₁ estimate eq. 6.37, coherence eq.
 * 6.39, random errors √((1 − γ²)/(2γ²·n)) of gain (relative) and phase (rad), tables 9.6 and section 9.2.4; n −
 * 1 for n here, which removes most of the bias of a coherence from few blocks
 */
export function frequencyResponse(test: SineTest): FrequencyResponse {
  const { inputs, outputs, samplesPerPeriod, periodsPerBlock = 1 } = test;
  const atLeast = 2 * samplesPerPeriod * periodsPerBlock;
  checkSeries(inputs, 'inputs', atLeast);
  checkSeries(outputs, 'outputs', atLeast);
  checkSettings([inputs.length === outputs.length, 'outputs', 'must be as many as the inputs.']);
  const given = phasors(inputs, samplesPerPeriod, periodsPerBlock);
  const answered = phasors(outputs, samplesPerPeriod, periodsPerBlock);
  return average(given, answered);
}

function phasors(values: ArrayLike<number>, samplesPerPeriod: number, periods: number): Phasor[] {
  const lockIn = new LockIn(samplesPerPeriod, periods);
  return Array.from(values).flatMap((value): Phasor[] => {
    if (!lockIn.add(value) || !lockIn.reading) return [];
    return [[lockIn.reading.inPhase.value, lockIn.reading.quadrature.value]];
  });
}

function average(given: readonly Phasor[], answered: readonly Phasor[]): FrequencyResponse {
  const power = (list: readonly Phasor[]) => list.reduce((sum, [re, im]) => sum + re * re + im * im, 0);
  let [crossRe, crossIm] = [0, 0];
  given.forEach(([a, b], i) => {
    const [c, d] = answered[i]!;
    crossRe += a * c + b * d;
    crossIm += a * d - b * c;
  });
  const cross = Math.hypot(crossRe, crossIm);
  const [inputPower, outputPower] = [power(given), power(answered)];
  checkSettings([inputPower > 0, 'inputs', 'must move at this frequency.']);
  const coherence = outputPower > 0 ? Math.min(cross ** 2 / (inputPower * outputPower), 1) : 0;
  const blocks = given.length;
  const error = Math.sqrt((1 - coherence) / (2 * coherence * (blocks - 1)));
  const gain = cross / inputPower;
  return {
    gain: { value: gain, standardError: gain * error },
    phaseRad: { value: Math.atan2(crossIm, crossRe), standardError: error },
    coherence,
    blocks,
  };
}
