import type { BenchTruth, ModelSettings } from '../kit/bench-model.js';
import { FixedStepModel } from '../kit/fixed-step-model.js';
import {
  beatWatchdog,
  initialWatchdog,
  stepWatchdog,
  waitingWatchdog,
  type WatchdogState,
} from '../kit/heartbeat-watchdog.js';
import { generator, generatorOff, stepGenerator, type GeneratorState } from './match-generator.js';
import { wanderingLoad } from './matcher-load.js';
import { bestTuning, reflectedShare, reflectionAt, type Complex, type Tuning } from './matcher-physics.js';
import { stepMotor, type MotorDrive } from './motor-drive.js';

/** Where the capacitors go when the watchdog acts, % of travel. */
export const restTuning: Tuning = { shuntPct: 60, seriesPct: 30 };

/** Standard deviations of the readings' noise; powers have a relative and an absolute part. */
export const noiseSigma = { powerRelative: 0.002, powerW: 0.3, magnitude: 0.002, phaseDeg: 0.5 };
/** Lag of the power sensors, s of bench time. */
const sensorTimeConstantS = 0.1;

/** Time step, s of bench time; the instruments read in every second. */
const plan = { stepS: 0.01, stepsPerReading: 2 };

/** Generator, network with motors, wandering load, instruments and watchdog, in bench time. */
export class MatcherModel extends FixedStepModel {
  private dog: WatchdogState = initialWatchdog;
  private command: Tuning = restTuning;
  private shunt: MotorDrive = { placePct: restTuning.shuntPct };
  private series: MotorDrive = { placePct: restTuning.seriesPct };
  private rf: GeneratorState = generatorOff;
  /** Powers behind the lag of their sensors, W. */
  private measured = { forwardW: 0, reflectedW: 0 };
  private readonly loadAt: (tS: number) => Complex;

  constructor(settings: ModelSettings) {
    super(
      [
        { name: 'shunt', unit: '%', isWritable: true },
        { name: 'series', unit: '%', isWritable: true },
        { name: 'heartbeat', isWritable: true },
        { name: 'generatorReset', isWritable: true },
        { name: 'shuntPosition', unit: '%' },
        { name: 'seriesPosition', unit: '%' },
        { name: 'forward', unit: 'W' },
        { name: 'reflected', unit: 'W' },
        { name: 'gammaMagnitude' },
        { name: 'gammaPhase', unit: 'deg' },
        { name: 'rfOn' },
        { name: 'generatorTrip' },
        { name: 'foldback' },
        { name: 'watchdogFlag' },
        { name: 'watchdogCount' },
      ],
      settings,
      plan,
    );
    this.loadAt = wanderingLoad(settings.seed, settings.isDrifting);
    this.takeReadings();
  }

  get watchdog(): Readonly<WatchdogState> {
    return this.dog;
  }

  /** Where the capacitors really are. */
  get tuning(): Tuning {
    return { shuntPct: this.shunt.placePct, seriesPct: this.series.placePct };
  }

  /** Power that the load gets, W; the best is all that the generator is set to. */
  get truth(): BenchTruth {
    const load = this.loadAt(this.tS);
    const best = bestTuning(load);
    const delivered = this.isOn ? this.rf.forwardW * (1 - reflectedShare(this.tuning, load)) : null;
    return {
      objective: delivered,
      bestObjective: generator.setW,
      loss: delivered === null ? null : Math.max(0, generator.setW - delivered),
      at: { shunt: this.shunt.placePct, series: this.series.placePct },
      best: { shunt: best.shuntPct, series: best.seriesPct },
    };
  }

  reboot(): void {
    this.dog = { ...waitingWatchdog(this.tS), count: this.dog.count };
    this.rf = generatorOff;
    this.command = restTuning;
    this.showController();
  }

  protected override step(tS: number, dtS: number): void {
    this.dog = stepWatchdog(this.dog, tS);
    if (this.dog.isTripped) this.command = restTuning;
    this.shunt = stepMotor(this.shunt, this.command.shuntPct, dtS);
    this.series = stepMotor(this.series, this.command.seriesPct, dtS);
    const share = reflectedShare(this.tuning, this.loadAt(tS));
    this.rf = stepGenerator(this.rf, share, !this.dog.isTripped, dtS);
    const follow = 1 - Math.exp(-dtS / sensorTimeConstantS);
    const { forwardW } = this.rf;
    this.measured.forwardW += follow * (forwardW - this.measured.forwardW);
    this.measured.reflectedW += follow * (forwardW * share - this.measured.reflectedW);
  }

  protected override take(name: string, value: number): boolean {
    if (name === 'heartbeat') this.dog = beatWatchdog(this.dog, value, this.tS);
    else if (name === 'generatorReset') {
      if (value > 0.5) this.rf = { ...this.rf, isTripped: false };
    } else if (value < 0 || value > 100) return false;
    else if (name === 'shunt') this.command = { ...this.command, shuntPct: value };
    else this.command = { ...this.command, seriesPct: value };
    this.showController();
    return true;
  }

  protected override takeReadings(): void {
    const { forwardW, reflectedW } = this.measured;
    const gamma = reflectionAt(this.tuning, this.loadAt(this.tS));
    const magnitude = Math.hypot(gamma.re, gamma.im) + this.noise(noiseSigma.magnitude);
    const phase = (Math.atan2(gamma.im, gamma.re) * 180) / Math.PI + this.noise(noiseSigma.phaseDeg);
    this.showController();
    this.show('shuntPosition', this.shunt.placePct);
    this.show('seriesPosition', this.series.placePct);
    this.show('forward', this.power(forwardW));
    this.show('reflected', this.power(reflectedW));
    // The detectors need a carrier.
    this.show('gammaMagnitude', this.isOn ? Math.abs(magnitude) : NaN);
    this.show('gammaPhase', this.isOn ? phase : NaN);
  }

  private get isOn(): boolean {
    return !this.dog.isTripped && !this.rf.isTripped;
  }

  private power(watt: number): number {
    return Math.max(0, watt * (1 + this.noise(noiseSigma.powerRelative)) + this.noise(noiseSigma.powerW));
  }

  /** What the controller knows of itself at once. */
  private showController(): void {
    this.show('shunt', this.command.shuntPct);
    this.show('series', this.command.seriesPct);
    this.show('heartbeat', this.dog.beat);
    // A push button: it reads as let go.
    this.show('generatorReset', 0);
    this.show('rfOn', this.isOn ? 1 : 0);
    this.show('generatorTrip', this.rf.isTripped ? 1 : 0);
    this.show('foldback', this.isOn && this.rf.forwardW < 0.98 * generator.setW ? 1 : 0);
    this.show('watchdogFlag', this.dog.isTripped ? 1 : 0);
    this.show('watchdogCount', this.dog.count & 0xffff);
  }
}
