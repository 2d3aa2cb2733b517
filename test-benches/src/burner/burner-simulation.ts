import {
  beatHeart,
  commandTrim,
  fuelFlowM3PerH,
  initialBurner,
  noiseSigma,
  step,
  truthOf,
  type BurnerState,
  type BurnerTruth,
} from './burner-model.js';
import { nominalAirTempC } from './burner-physics.js';
import { seededRandom, type SeededRandom } from '../kit/seeded-random.js';

/** What the burner's instruments show. */
export interface BurnerReadings {
  damperPct: number;
  o2Pct: number;
  coPpm: number;
  flueTempC: number;
  airTempC: number;
  fuelFlowM3PerH: number;
}

export interface SimulationOptions {
  seed: number;
  isNoisy: boolean;
  isDrifting: boolean;
}

/** Faults that an instructor can set, by the value of the fault register. */
export const BurnerFault = { none: 0, coNotANumber: 1, sensorExceptions: 2, frozen: 3 } as const;

/** Time step of the model, s of bench time. */
const stepS = 0.01;

/** The burner with its instruments, advanced in fixed steps of bench time: same seed and writes, same course. */
export class BurnerSimulation {
  private state: BurnerState = initialBurner;
  private steps = 0;
  private shown: BurnerReadings;
  private readonly random: SeededRandom;
  fault: number = BurnerFault.none;
  /** Told when the watchdog trips or clears. */
  onWatchdog: (isTripped: boolean, count: number) => void = () => {};

  constructor(private readonly options: SimulationOptions) {
    this.random = seededRandom(options.seed);
    this.shown = this.sample();
  }

  get now(): Readonly<BurnerState> {
    return this.state;
  }

  /** The instruments as they stand; frozen ones keep what they showed. */
  get readings(): Readonly<BurnerReadings> {
    return this.shown;
  }

  get truth(): BurnerTruth {
    return truthOf(this.state, this.options);
  }

  /** @param benchS bench time to go to, s; the past is ignored */
  advanceTo(benchS: number): void {
    const wasTripped = this.state.watchdog.isTripped;
    const goal = Math.floor(benchS / stepS);
    while (this.steps < goal) {
      this.steps += 1;
      // From the step count, so that a long run gathers no rounding.
      this.state = step(this.state, this.steps * stepS - this.state.tS, this.options);
      if (this.fault !== BurnerFault.frozen) this.shown = this.sample();
    }
    this.reportWatchdog(wasTripped);
  }

  writeTrim(trimPct: number): void {
    this.state = commandTrim(this.state, trimPct);
  }

  writeHeartbeat(beat: number): void {
    const wasTripped = this.state.watchdog.isTripped;
    this.state = beatHeart(this.state, beat);
    this.reportWatchdog(wasTripped);
  }

  private reportWatchdog(wasTripped: boolean): void {
    const { isTripped, count } = this.state.watchdog;
    if (isTripped !== wasTripped) this.onWatchdog(isTripped, count);
  }

  private sample(): BurnerReadings {
    const { measured, damperPct, isFlameOn } = this.state;
    const noise = (sigma: number) => (this.options.isNoisy ? sigma * this.random.normal() : 0);
    return {
      damperPct,
      o2Pct: clamp(measured.o2Pct + noise(noiseSigma.o2Pct), 0, 21),
      coPpm: Math.max(0, measured.coPpm * (1 + noise(noiseSigma.coRelative)) + noise(noiseSigma.coPpm)),
      flueTempC: measured.flueTempC + noise(noiseSigma.flueTempC),
      airTempC: nominalAirTempC + noise(noiseSigma.airTempC),
      fuelFlowM3PerH: isFlameOn ? fuelFlowM3PerH + noise(noiseSigma.fuel) : 0,
    };
  }
}

function clamp(value: number, min: number, max: number): number {
  return Math.min(Math.max(value, min), max);
}
