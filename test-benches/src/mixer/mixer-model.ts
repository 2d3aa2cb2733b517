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
import { cultureRates, steadyState, type Culture } from './chemostat-physics.js';
import { createDeadTime, passDeadTime } from './dead-time.js';
import {
  feed,
  feedFlow,
  hillsOf,
  settledProduct,
  shareOf,
  tanks,
  type Hill,
  type Product,
} from './mixer-physics.js';

/** Where the distributor rests, with the feed pump off: between the first two tanks, on the lowest of the hills. */
export const restPositionPct = 15;
export const positionRange = [0, 100] as const;

const stepS = 0.05;
/** Hours of culture in a second of bench time: 24 minutes. */
export const cultureHPerS = 0.4;
/** Drive of the distributor, % per s. */
export const driveRatePctPerS = 5;
/** Product header and analyser: dead time and lag, s. */
export const analyser = { deadTimeS: 2, lagS: 1.5 };
/** Deviations of the readings' noise, g/L and °C. */
const noise = { biomass: 0.02, substrate: 0.03, tempC: 0.05 };
/** Of the growth rate of each tank: share and period, s; the phase comes with the seed. */
const drift = { share: 0.04, periodsS: [1700, 1300, 2100, 1500] };
/** The tank that the fault strikes, counted from 0, and what is left of its growth rate. */
const inhibitedTank = 1;
const inhibitedShare = 0.5;
/** How long a computed best point counts as that of the moment, s: the drift moves it by 0.02 % in that time. */
const bestForS = 8;

/** Four continuous cultures that share one feed by a distributor, into one product. */
export class MixerModel extends FixedStepModel {
  watchdog: WatchdogState = initialWatchdog;
  private command = restPositionPct;
  private position = restPositionPct;
  private readonly phases: readonly number[];
  private readonly cultures: Culture[];
  private readonly delays = { biomass: createDeadTime(1, 0), substrate: createDeadTime(1, 0) };
  private readonly shownProduct: Product;
  private isInhibited = false;
  private best: { hills: Hill[]; atS: number } | null = null;

  constructor(settings: ModelSettings) {
    super(
      [
        { name: 'distributor', unit: '%', isWritable: true },
        { name: 'heartbeat', isWritable: true },
        { name: 'position', unit: '%' },
        { name: 'biomass', unit: 'g/L' },
        { name: 'substrate', unit: 'g/L' },
        { name: 'feedFlow', unit: 'L/h' },
        { name: 'cultureTemp', unit: '°C' },
        { name: 'pumpRunning' },
        { name: 'watchdogFlag' },
        { name: 'watchdogCount' },
      ],
      settings,
      { stepS, stepsPerReading: 2 },
    );
    const chance = seededRandom(settings.seed * 7919 + 41);
    this.phases = tanks.map(() => 2 * Math.PI * chance.uniform());
    this.cultures = tanks.map(({ volume, kinetics }, tank) =>
      steadyState(kinetics, feed, (shareOf(this.position, tank) * feedFlow) / volume),
    );
    this.shownProduct = this.product;
    const steps = Math.round(analyser.deadTimeS / stepS);
    this.delays.biomass = createDeadTime(steps, this.shownProduct.biomass);
    this.delays.substrate = createDeadTime(steps, this.shownProduct.substrate);
    this.takeReadings();
  }

  /** Biomass in the product that a position settles to; the waste is least at nearly the same place. */
  get truth(): BenchTruth {
    const [best] = this.hills;
    if (!best) throw new Error('The yield has no hill.');
    const isRunning = !this.watchdog.isTripped;
    const biomass = settledProduct(this.position, this.vigour).biomass;
    return {
      objective: isRunning ? biomass : null,
      bestObjective: best.biomass,
      loss: isRunning ? Math.max(0, best.biomass - biomass) : null,
      at: { distributor: this.position },
      best: { distributor: best.position },
    };
  }

  /** All hills of this moment, best first. */
  get hills(): readonly Hill[] {
    if (!this.best || this.tS - this.best.atS >= bestForS) {
      this.best = { hills: hillsOf(this.vigour), atS: this.tS };
    }
    return this.best.hills;
  }

  /** Halves the growth in the second tank, or lets it go again: without it the hill of the last two is the highest. */
  inhibit(isOn: boolean): void {
    this.isInhibited = isOn;
    this.best = null;
  }

  reboot(): void {
    this.command = restPositionPct;
    this.watchdog = { ...waitingWatchdog(this.tS), count: this.watchdog.count };
  }

  protected step(tS: number, dtS: number): void {
    this.watchdog = stepWatchdog(this.watchdog, tS);
    if (this.watchdog.isTripped) this.command = restPositionPct;
    const reach = driveRatePctPerS * dtS;
    this.position += Math.min(Math.max(this.command - this.position, -reach), reach);
    this.grow(dtS * cultureHPerS);
    const { biomass, substrate } = this.product;
    const share = -Math.expm1(-dtS / analyser.lagS);
    const shown = this.shownProduct;
    shown.biomass += share * (passDeadTime(this.delays.biomass, biomass) - shown.biomass);
    shown.substrate += share * (passDeadTime(this.delays.substrate, substrate) - shown.substrate);
  }

  protected takeReadings(): void {
    const isRunning = !this.watchdog.isTripped;
    const { biomass, substrate } = this.shownProduct;
    this.show('distributor', this.command);
    this.show('heartbeat', this.watchdog.beat);
    this.show('position', this.position);
    this.show('biomass', Math.max(0, biomass + this.noise(noise.biomass)));
    this.show('substrate', Math.max(0, substrate + this.noise(noise.substrate)));
    this.show('feedFlow', isRunning ? feedFlow : 0);
    this.show('cultureTemp', 30 + this.noise(noise.tempC));
    this.show('pumpRunning', isRunning ? 1 : 0);
    this.show('watchdogFlag', isRunning ? 0 : 1);
    this.show('watchdogCount', this.watchdog.count);
  }

  protected take(name: string, value: number): boolean {
    if (name === 'heartbeat') {
      this.watchdog = beatWatchdog(this.watchdog, value, this.tS);
      this.show(name, this.watchdog.beat);
      return true;
    }
    if (value < positionRange[0] || value > positionRange[1]) return false;
    this.command = this.watchdog.isTripped ? restPositionPct : value;
    this.show(name, this.command);
    return true;
  }

  /** Growth rates over their nominal ones. */
  private get vigour(): readonly number[] {
    return tanks.map((_, tank) => {
      const left = this.isInhibited && tank === inhibitedTank ? inhibitedShare : 1;
      if (!this.settings.isDrifting) return left;
      const turns = this.tS / (drift.periodsS[tank] ?? Infinity);
      return left * (1 + drift.share * Math.sin(2 * Math.PI * turns + (this.phases[tank] ?? 0)));
    });
  }

  /** What leaves the tanks now, without what the feed brought along. */
  private get product(): Product {
    const product = { biomass: 0, substrate: 0 };
    this.cultures.forEach(({ biomass, substrate }, tank) => {
      const share = shareOf(this.position, tank);
      product.biomass += share * (biomass - feed.biomass);
      product.substrate += share * substrate;
    });
    return product;
  }

  /** One step of all cultures by Heun's rule. */
  private grow(dtH: number): void {
    const { vigour } = this;
    tanks.forEach(({ volume, kinetics }, tank) => {
      const culture = this.cultures[tank] as Culture;
      const flow = this.watchdog.isTripped ? 0 : shareOf(this.position, tank) * feedFlow;
      const grown = { ...kinetics, growthMax: kinetics.growthMax * (vigour[tank] as number) };
      const before = cultureRates(grown, feed, culture, flow / volume);
      const guess = {
        substrate: culture.substrate + before.substrate * dtH,
        biomass: culture.biomass + before.biomass * dtH,
      };
      const after = cultureRates(grown, feed, guess, flow / volume);
      culture.substrate = Math.max(0, culture.substrate + ((before.substrate + after.substrate) / 2) * dtH);
      culture.biomass += ((before.biomass + after.biomass) / 2) * dtH;
    });
  }
}
