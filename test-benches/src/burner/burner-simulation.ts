import type { BenchModel, BenchTruth, ModelSettings } from '../kit/bench-model.js';
import { FixedStepModel } from '../kit/fixed-step-model.js';
import type { WatchdogState } from '../kit/heartbeat-watchdog.js';
import {
  beatHeart,
  commandTrim,
  fuelFlowM3PerH,
  initialBurner,
  noiseSigma,
  rebootBurner,
  step,
  truthOf,
  type BurnerState,
} from './burner-model.js';
import { nominalAirTempC } from './burner-physics.js';

/** The truth of the burner, with the names that its log has had from the beginning. */
export interface BurnerTruth extends BenchTruth {
  /** Efficiency without lag and noise, %; null with the flame out. */
  readonly efficiency: number | null;
  readonly bestEfficiency: number;
  readonly bestTrim: number;
  readonly trim: number;
}

/** Highest air trim that the damper takes, %. */
export const maxTrimPct = 100;
/** Time step of the model, s of bench time; its instruments read in each. */
const stepS = 0.01;

/** The burner with its instruments and its watchdog, in bench time. */
export class BurnerSimulation extends FixedStepModel implements BenchModel {
  private state: BurnerState = initialBurner;

  constructor(settings: ModelSettings) {
    super(
      [
        { name: 'airTrim', unit: '%', isWritable: true },
        { name: 'heartbeat', isWritable: true },
        { name: 'damper', unit: '%' },
        { name: 'o2', unit: '%' },
        { name: 'co', unit: 'ppm' },
        { name: 'flueTemp', unit: '°C' },
        { name: 'airTemp', unit: '°C' },
        { name: 'flame' },
        { name: 'watchdogFlag' },
        { name: 'watchdogCount' },
        { name: 'fuelFlow', unit: 'm³/h' },
      ],
      settings,
      { stepS, stepsPerReading: 1 },
    );
    this.takeReadings();
  }

  get now(): Readonly<BurnerState> {
    return this.state;
  }

  get watchdog(): Readonly<WatchdogState> {
    return this.state.watchdog;
  }

  get truth(): BurnerTruth {
    const { best, efficiencyPct, trimPct } = truthOf(this.state, this.settings);
    const efficiency = Number.isFinite(efficiencyPct) ? efficiencyPct : null;
    return {
      objective: efficiency,
      bestObjective: best.efficiencyPct,
      loss: efficiency === null ? null : Math.max(0, best.efficiencyPct - efficiency),
      at: { airTrim: trimPct },
      best: { airTrim: best.trimPct },
      efficiency,
      bestEfficiency: best.efficiencyPct,
      bestTrim: best.trimPct,
      trim: trimPct,
    };
  }

  reboot(): void {
    this.state = rebootBurner(this.state);
    this.showController();
  }

  protected override step(_tS: number, dtS: number): void {
    this.state = step(this.state, dtS, this.settings);
  }

  protected override take(name: string, value: number): boolean {
    if (name === 'heartbeat') this.state = beatHeart(this.state, value);
    else if (value < 0 || value > maxTrimPct) return false;
    else this.state = commandTrim(this.state, value);
    this.showController();
    return true;
  }

  protected override takeReadings(): void {
    const { measured, damperPct, isFlameOn } = this.state;
    this.showController();
    this.show('damper', damperPct);
    this.show('o2', clamp(measured.o2Pct + this.noise(noiseSigma.o2Pct), 0, 21));
    const coPpm = measured.coPpm * (1 + this.noise(noiseSigma.coRelative)) + this.noise(noiseSigma.coPpm);
    this.show('co', Math.max(0, coPpm));
    this.show('flueTemp', measured.flueTempC + this.noise(noiseSigma.flueTempC));
    this.show('airTemp', nominalAirTempC + this.noise(noiseSigma.airTempC));
    this.show('fuelFlow', isFlameOn ? fuelFlowM3PerH + this.noise(noiseSigma.fuel) : 0);
  }

  /** What the controller knows of itself at once. */
  private showController(): void {
    const { commandPct, isFlameOn, watchdog } = this.state;
    this.show('airTrim', commandPct);
    this.show('heartbeat', watchdog.beat);
    this.show('flame', isFlameOn ? 1 : 0);
    this.show('watchdogFlag', watchdog.isTripped ? 1 : 0);
    this.show('watchdogCount', watchdog.count & 0xffff);
  }
}

function clamp(value: number, min: number, max: number): number {
  return Math.min(Math.max(value, min), max);
}
