import type { BenchTruth, ModelSettings } from '../kit/bench-model.js';
import { FixedStepModel } from '../kit/fixed-step-model.js';
import {
  beatWatchdog,
  initialWatchdog,
  stepWatchdog,
  waitingWatchdog,
  type WatchdogState,
} from '../kit/heartbeat-watchdog.js';
import { seededRandom } from '../kit/seeded-random.js';
import { benchOpening, fillPulse } from './pulser-physics.js';
import {
  bestPulse,
  cleanEnergyMJ,
  inversionOf,
  outputMJ,
  plant,
  totalEnergyMJ,
  wanderingPulser,
  type PulserHidden,
  type PulserSetting,
} from './pulser-plant.js';
import { pointEvery, tracePoints } from './pulse-table.js';

/** Where the settings go when the watchdog or the protection acts: too little drive for a pulse. */
export const restSetting: PulserSetting = { drivePct: 15, delayUs: 300 };
/** What the settings may be. */
export const settingRange = { drivePct: [0, 100], delayUs: [50, 700] } as const;

/** Standard deviations of noise: of the trace, kW and relative for a pulse as a whole; of the energy, relative. */
export const noiseSigma = { traceKW: 2, pulseRelative: 0.004, energyRelative: 0.004, energyMJ: 0.2 };
/** The optics are in danger above this energy of a pulse, mJ, for longer than so many s of bench time. */
export const protection = { energyMJ: 165, afterS: 1 };
/** Rate of the drive's supply, % per s of bench time, and lag of the energy meter, s. */
const supplyRatePctPerS = 10;
const meterTimeConstantS = 0.5;

/** Time step, s of bench time; a pulse every tenth of a second. */
const plan = { stepS: 0.01, stepsPerReading: 10 };

/** All that a pulse follows from. */
interface Shot {
  readonly number: number;
  readonly inversion: number;
  readonly outputMJ: number;
}

/** Lamp, switch, rod, instruments, protection and watchdog, in bench time. */
export class PulserModel extends FixedStepModel {
  private dog: WatchdogState = initialWatchdog;
  private command: PulserSetting = restSetting;
  private drivePct = restSetting.drivePct;
  private meterMJ = 0;
  private overS = 0;
  private isProtected = false;
  private shot: Shot = { number: 0, inversion: 0, outputMJ: 0 };
  private shownShot = -1;
  private readonly hiddenAt: (tS: number) => PulserHidden;

  constructor(settings: ModelSettings) {
    super(
      [
        { name: 'drive', unit: '%', isWritable: true },
        { name: 'delay', unit: 'µs', isWritable: true },
        { name: 'heartbeat', isWritable: true },
        { name: 'protectionReset', isWritable: true },
        { name: 'driveActual', unit: '%' },
        { name: 'energy', unit: 'mJ' },
        { name: 'pulse', unit: 'kW', points: tracePoints },
        { name: 'laserOn' },
        { name: 'protectionTrip' },
        { name: 'watchdogFlag' },
        { name: 'watchdogCount' },
      ],
      settings,
      plan,
    );
    this.hiddenAt = wanderingPulser(settings.seed, settings.isDrifting);
    this.takeReadings();
  }

  get watchdog(): Readonly<WatchdogState> {
    return this.dog;
  }

  /** Clean energy, mJ. */
  get truth(): BenchTruth {
    const hidden = this.hiddenAt(this.tS);
    const best = bestPulse(hidden);
    const clean = this.isOn ? cleanEnergyMJ(this.setting, hidden) : null;
    return {
      objective: clean,
      bestObjective: best.cleanMJ,
      loss: clean === null ? null : Math.max(0, best.cleanMJ - clean),
      at: { drive: this.drivePct, delay: this.command.delayUs },
      best: { drive: best.drivePct, delay: best.delayUs },
    };
  }

  reboot(): void {
    this.dog = { ...waitingWatchdog(this.tS), count: this.dog.count };
    this.command = restSetting;
    this.showController();
  }

  protected override step(tS: number, dtS: number): void {
    this.dog = stepWatchdog(this.dog, tS);
    if (!this.isOn) this.command = restSetting;
    const reach = supplyRatePctPerS * dtS;
    this.drivePct += Math.min(Math.max(this.command.drivePct - this.drivePct, -reach), reach);
    const energyMJ = this.isOn ? totalEnergyMJ(this.setting, this.hiddenAt(tS)) : 0;
    this.meterMJ += (1 - Math.exp(-dtS / meterTimeConstantS)) * (energyMJ - this.meterMJ);
    this.overS = energyMJ > protection.energyMJ ? this.overS + dtS : 0;
    if (this.overS > protection.afterS) this.isProtected = true;
  }

  protected override take(name: string, value: number): boolean {
    if (name === 'heartbeat') this.dog = beatWatchdog(this.dog, value, this.tS);
    else if (name === 'protectionReset') this.isProtected &&= !(value > 0.5);
    else if (name === 'drive' && isWithin(value, settingRange.drivePct))
      this.command = { ...this.command, drivePct: value };
    else if (name === 'delay' && isWithin(value, settingRange.delayUs))
      this.command = { ...this.command, delayUs: value };
    else return false;
    this.showController();
    return true;
  }

  protected override takeReadings(): void {
    this.showController();
    this.show('driveActual', this.drivePct);
    const meter = this.meterMJ * (1 + this.noise(noiseSigma.energyRelative));
    this.show('energy', Math.max(0, meter + this.noise(noiseSigma.energyMJ)));
    this.shot = {
      number: this.shot.number + 1,
      inversion: this.isOn ? inversionOf(this.setting, this.hiddenAt(this.tS)) : 0,
      outputMJ: outputMJ(this.drivePct),
    };
  }

  /** The pulse of the last shot; worked out where somebody looks, always the same for the same shot. */
  override readTrace(name: string): Float64Array {
    const trace = super.readTrace(name);
    if (this.shownShot === this.shot.number) return trace;
    this.shownShot = this.shot.number;
    const { number, inversion, outputMJ: output } = this.shot;
    const { seed, isNoisy } = this.settings;
    const random = seededRandom(Math.imul(number, 0x9e37) ^ seed);
    const noise = (sigma: number) => (isNoisy ? sigma * random.normal() : 0);
    if (inversion > 0) fillPulse(inversion, benchOpening, pointEvery, trace);
    else trace.fill(0);
    // 1 mJ in 1 ns is 1000 kW.
    const scale = ((1000 * output) / plant.lifetimeNs) * (1 + noise(noiseSigma.pulseRelative));
    trace.forEach((power, i) => (trace[i] = power * scale + noise(noiseSigma.traceKW)));
    return trace;
  }

  private get setting(): PulserSetting {
    return { drivePct: this.drivePct, delayUs: this.command.delayUs };
  }

  private get isOn(): boolean {
    return !this.dog.isTripped && !this.isProtected;
  }

  /** What the controller knows of itself at once. */
  private showController(): void {
    this.show('drive', this.command.drivePct);
    this.show('delay', this.command.delayUs);
    this.show('heartbeat', this.dog.beat);
    // A push button: it reads as let go.
    this.show('protectionReset', 0);
    this.show('laserOn', this.isOn ? 1 : 0);
    this.show('protectionTrip', this.isProtected ? 1 : 0);
    this.show('watchdogFlag', this.dog.isTripped ? 1 : 0);
    this.show('watchdogCount', this.dog.count & 0xffff);
  }
}

function isWithin(value: number, [min, max]: readonly [number, number]): boolean {
  return value >= min && value <= max;
}
