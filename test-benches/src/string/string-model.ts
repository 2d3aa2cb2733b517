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
import type { PowerPoint } from './single-diode.js';
import { bestPower, sectionsOf, stringCurrent, stringVoltage, type Section } from './string-physics.js';
import { weatherOf, withShadow, type Profile, type Weather } from './weather.js';

/** Where the converter rests: above the open-circuit voltage of a warm string, so that it draws next to nothing. */
export const restVoltageV = 190;
export const voltageRange = [10, 200] as const;

/** Lag of the converter's voltage loop, s, and its greatest rate, V/s. */
const loop = { timeConstantS: 0.05, rateVPerS: 400 };
/**
 * Ripple that the voltage loop makes by itself: its regulator switches between two currents and lets the storage
 * capacitor swing. A converter does that at tens of kilohertz; here it is slow enough for a serial line to follow.
 */
export const ripple = { amplitudeV: 1.5, periodS: 0.5, thirdHarmonic: 1 / 9, wander: 0.004 };
/** Deviations of the readings' noise. */
const noise = { voltageV: 0.06, currentA: 0.012, powerW: 1, irradiance: 4, tempC: 0.1 };
/** Cells above the air at 1000 W/m², K (47 °C nominal: 27 K at 800 W/m²), and how slowly they follow, s. */
const heat = { airTempC: 18, riseK: 33.75, timeConstantS: 240 };
/** Lag of the irradiance sensor (a thermopile), s. */
const sensorLagS = 2;

/** The best power changes by 0.4 % a K: this is a ten-thousandth of it. */
const sameWarmthK = 0.02;

/** What the best point hangs on. */
interface Light {
  readonly irradiance: number;
  readonly cellTempC: number;
  readonly shades: Weather['shades'];
}

export interface StringSettings extends ModelSettings {
  profile: Profile;
}

/** A photovoltaic string of six modules on a DC/DC converter that holds its voltage. */
export class StringModel extends FixedStepModel {
  watchdog: WatchdogState = initialWatchdog;
  private readonly weather: Weather;
  private setpointV = restVoltageV;
  /** Voltage of the loop without ripple, V. */
  private heldV = restVoltageV;
  private phase = 0;
  /** Ripple frequency over its nominal one. */
  private pace = 1;
  private cellTempC: number;
  private irradiance: number;
  private sensedIrradiance: number;
  private sections: Section[] = [];
  private shades: Weather['shades'];
  private best: (Light & { readonly point: PowerPoint }) | null = null;

  constructor(settings: StringSettings) {
    super(
      [
        { name: 'voltageSetpoint', unit: 'V', isWritable: true },
        { name: 'heartbeat', isWritable: true },
        { name: 'voltage', unit: 'V' },
        { name: 'current', unit: 'A' },
        { name: 'power', unit: 'W' },
        { name: 'irradiance', unit: 'W/m²' },
        { name: 'cellTemp', unit: '°C' },
        { name: 'running' },
        { name: 'watchdogFlag' },
        { name: 'watchdogCount' },
      ],
      settings,
      { stepS: 0.01, stepsPerReading: 2 },
    );
    // A sequence of its own: the weather does not hang on how many readings were taken.
    this.weather = weatherOf(settings.profile, seededRandom(settings.seed * 7919 + 17));
    this.shades = this.weather.shades;
    this.irradiance = this.weather.irradiance(0);
    this.sensedIrradiance = this.irradiance;
    this.cellTempC = heat.airTempC + (heat.riseK * this.irradiance) / 1000;
    this.lightUp();
    this.takeReadings();
  }

  get truth(): BenchTruth {
    const best = this.bestPoint;
    const { voltageV, powerW } = this.operatingPoint;
    const isRunning = !this.watchdog.isTripped;
    return {
      objective: isRunning ? powerW : null,
      bestObjective: best.powerW,
      loss: isRunning ? Math.max(0, best.powerW - powerW) : null,
      at: { voltageSetpoint: voltageV },
      best: { voltageSetpoint: best.voltageV },
    };
  }

  /** Point of greatest power of this moment; in steady light it is not searched again for a breath of warmth. */
  get bestPoint(): PowerPoint {
    const { irradiance, cellTempC, shades, best } = this;
    const isAsBefore =
      best !== null &&
      best.irradiance === irradiance &&
      best.shades === shades &&
      Math.abs(best.cellTempC - cellTempC) < sameWarmthK;
    if (isAsBefore) return best.point;
    const point = bestPower(this.sections);
    this.best = { irradiance, cellTempC, shades, point };
    return point;
  }

  /** Where the string is now, ripple and all, without noise. */
  get operatingPoint(): PowerPoint {
    const askedV = Math.max(0, this.heldV + this.rippleV);
    const currentA = this.watchdog.isTripped ? 0 : stringCurrent(this.sections, askedV);
    // Without current the string stands at its open-circuit voltage, whatever it is asked for.
    const voltageV = currentA > 0 ? askedV : stringVoltage(this.sections, 0);
    return { voltageV, currentA, powerW: voltageV * currentA };
  }

  /** A shadow on two of the modules that stand in full light, or away from them. */
  castShadow(isOn: boolean): void {
    this.shades = isOn ? withShadow(this.weather.shades) : this.weather.shades;
    this.lightUp();
  }

  reboot(): void {
    this.setpointV = restVoltageV;
    this.watchdog = { ...waitingWatchdog(this.tS), count: this.watchdog.count };
  }

  protected step(tS: number, dtS: number): void {
    this.watchdog = stepWatchdog(this.watchdog, tS);
    if (this.watchdog.isTripped) this.setpointV = restVoltageV;
    this.irradiance = this.weather.irradiance(tS);
    const follow = (from: number, to: number, lagS: number) => from + (to - from) * -Math.expm1(-dtS / lagS);
    const reach = loop.rateVPerS * dtS;
    const change = follow(this.heldV, this.setpointV, loop.timeConstantS) - this.heldV;
    this.heldV += Math.min(Math.max(change, -reach), reach);
    const warmC = heat.airTempC + (heat.riseK * this.irradiance) / 1000;
    this.cellTempC = follow(this.cellTempC, warmC, heat.timeConstantS);
    this.sensedIrradiance = follow(this.sensedIrradiance, this.irradiance, sensorLagS);
    if (this.settings.isDrifting) this.pace = 1 + ripple.wander * Math.sin((2 * Math.PI * tS) / 97);
    this.phase = (this.phase + (2 * Math.PI * this.pace * dtS) / ripple.periodS) % (2 * Math.PI);
  }

  protected takeReadings(): void {
    this.lightUp();
    const { voltageV, currentA, powerW } = this.operatingPoint;
    this.show('voltageSetpoint', this.setpointV);
    this.show('heartbeat', this.watchdog.beat);
    this.show('voltage', voltageV + this.noise(noise.voltageV));
    this.show('current', Math.max(0, currentA + this.noise(noise.currentA)));
    this.show('power', powerW + this.noise(noise.powerW));
    this.show('irradiance', Math.max(0, this.sensedIrradiance + this.noise(noise.irradiance)));
    this.show('cellTemp', this.cellTempC + this.noise(noise.tempC));
    this.show('running', this.watchdog.isTripped ? 0 : 1);
    this.show('watchdogFlag', this.watchdog.isTripped ? 1 : 0);
    this.show('watchdogCount', this.watchdog.count);
  }

  protected take(name: string, value: number): boolean {
    if (name === 'heartbeat') this.watchdog = beatWatchdog(this.watchdog, value, this.tS);
    else if (value < voltageRange[0] || value > voltageRange[1]) return false;
    else this.setpointV = this.watchdog.isTripped ? restVoltageV : value;
    this.show(name, name === 'heartbeat' ? this.watchdog.beat : this.setpointV);
    return true;
  }

  /** A triangle's first two terms: what a capacitor charged and drained by constant currents shows. */
  private get rippleV(): number {
    if (this.watchdog.isTripped) return 0;
    return ripple.amplitudeV * (Math.sin(this.phase) - ripple.thirdHarmonic * Math.sin(3 * this.phase));
  }

  private lightUp(): void {
    this.sections = sectionsOf(this.irradiance, this.cellTempC, this.shades);
  }
}
