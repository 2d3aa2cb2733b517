import type { BenchTruth, ModelSettings } from '../kit/bench-model.js';
import { FixedStepModel } from '../kit/fixed-step-model.js';
import {
  beatWatchdog,
  initialWatchdog,
  stepWatchdog,
  waitingWatchdog,
  type WatchdogState,
} from '../kit/heartbeat-watchdog.js';
import { seededRandom, type SeededRandom } from '../kit/seeded-random.js';
import { benchTransmission, lossDb, tiltTransmission, modeRadiusUm } from './coupling-physics.js';
import { converted, createPiezoStage, movePiezo, travelUmPerV } from './piezo-stage.js';

/** Both drives rest in the middle of their travel, so that there is room to either side. */
export const restDriveV = 50;
export const driveRange = [0, 100] as const;
const middleUm = travelUmPerV * restDriveV;

/** Lag of the stages, and of the power meter, s. */
const lags = { stageS: 0.02, meterS: 0.05 };
/** How much of the other axis' travel each axis takes with it. */
const crossTalk = { xOfY: 0.12, yOfX: -0.08 };
/** Power at the aperture, dBm, and the wander of the laser about it, dB. */
const laser = { powerDbm: 3, wanderDb: 0.1, periodS: 310 };
/** Detector: noise as a share of the power and as a power, and where its scale ends. */
const detector = { relative: 0.004, noiseMw: 2e-6, floorMw: 1e-7 };
/** The fibre is tilted by this much for good, rad. */
const tilt = { rad: 0.012, wavelengthUm: 1.55, index: 1 };
/** Swing of the best place with the temperature of the mount, one entry per axis, µm and s. */
const drifts = [
  { amplitudeUm: 2.5, periodS: 420 },
  { amplitudeUm: 2, periodS: 290 },
] as const;
/** How far the best place is from the middle at the start, and how far a bump moves it, µm: onto the first ring. */
const startUm = [10, 14] as const;
const bumpUm = [9, 13] as const;
/** The best place stays so far inside the travel, drift left out, µm. */
const marginUm = 6;

interface Place {
  x: number;
  y: number;
}

/** Light from an aperture into a fibre on a two-axis piezo stage. */
export class CouplingModel extends FixedStepModel {
  watchdog: WatchdogState = initialWatchdog;
  private readonly stages = { x: createPiezoStage(restDriveV), y: createPiezoStage(restDriveV) };
  private readonly phases: readonly number[];
  /** A sequence of its own, so that alignment and bumps do not hang on how many readings were taken. */
  private readonly chance: SeededRandom;
  private driveX = restDriveV;
  private driveY = restDriveV;
  /** Best place without drift, µm on the axes of the fibre. */
  private home: Place = { x: 0, y: 0 };
  private fibre: Place = { x: middleUm, y: middleUm };
  private bestPlace: Place = { x: 0, y: 0 };
  private meteredMw = 0;

  constructor(settings: ModelSettings) {
    super(
      [
        { name: 'driveX', unit: 'V', isWritable: true },
        { name: 'driveY', unit: 'V', isWritable: true },
        { name: 'heartbeat', isWritable: true },
        { name: 'powerDbm', unit: 'dBm' },
        { name: 'powerMw', unit: 'mW' },
        { name: 'mountTemp', unit: '°C' },
        { name: 'shutterOpen' },
        { name: 'watchdogFlag' },
        { name: 'watchdogCount' },
      ],
      settings,
      { stepS: 0.005, stepsPerReading: 2 },
    );
    this.chance = seededRandom(settings.seed * 7919 + 29);
    this.phases = drifts.map(() => 2 * Math.PI * this.chance.uniform());
    this.fibre = this.stand();
    this.home = { ...this.fibre };
    this.shiftHome(startUm);
    this.bestPlace = this.drifted(0);
    this.takeReadings();
  }

  get truth(): BenchTruth {
    const { x, y } = this.fibre;
    const isOpen = !this.watchdog.isTripped;
    const bestObjective = laser.powerDbm + this.wanderDb - tiltLossDb - lossDb(benchTransmission(0));
    const powerDbm = 10 * Math.log10(Math.max(this.coupledMw, detector.floorMw));
    return {
      objective: isOpen ? powerDbm : null,
      bestObjective,
      loss: isOpen ? Math.max(0, bestObjective - powerDbm) : null,
      at: { x, y },
      best: { ...this.bestPlace },
    };
  }

  /** Somebody knocks against the mount: the best place jumps, seen from the old one onto the first ring. */
  bump(): void {
    this.shiftHome(bumpUm);
  }

  reboot(): void {
    this.driveX = restDriveV;
    this.driveY = restDriveV;
    this.watchdog = { ...waitingWatchdog(this.tS), count: this.watchdog.count };
  }

  protected step(tS: number, dtS: number): void {
    this.watchdog = stepWatchdog(this.watchdog, tS);
    if (this.watchdog.isTripped) this.driveX = this.driveY = restDriveV;
    this.bestPlace = this.drifted(tS);
    const goal = this.stand();
    const share = -Math.expm1(-dtS / lags.stageS);
    this.fibre.x += share * (goal.x - this.fibre.x);
    this.fibre.y += share * (goal.y - this.fibre.y);
    this.meteredMw += -Math.expm1(-dtS / lags.meterS) * (this.coupledMw - this.meteredMw);
  }

  protected takeReadings(): void {
    const relative = 1 + this.noise(detector.relative);
    const powerMw = this.meteredMw * relative + this.noise(detector.noiseMw);
    this.show('driveX', this.driveX);
    this.show('driveY', this.driveY);
    this.show('heartbeat', this.watchdog.beat);
    this.show('powerMw', powerMw);
    this.show('powerDbm', 10 * Math.log10(Math.max(powerMw, detector.floorMw)));
    this.show('mountTemp', 24 + 1.5 * this.swing(0, this.tS) + this.noise(0.05));
    this.show('shutterOpen', this.watchdog.isTripped ? 0 : 1);
    this.show('watchdogFlag', this.watchdog.isTripped ? 1 : 0);
    this.show('watchdogCount', this.watchdog.count);
  }

  protected take(name: string, value: number): boolean {
    if (name === 'heartbeat') {
      this.watchdog = beatWatchdog(this.watchdog, value, this.tS);
      this.show(name, this.watchdog.beat);
      return true;
    }
    if (value < driveRange[0] || value > driveRange[1]) return false;
    const volts = this.watchdog.isTripped ? restDriveV : value;
    if (name === 'driveX') this.driveX = volts;
    else this.driveY = volts;
    this.show(name, volts);
    return true;
  }

  /** Moves the stages to their drives. @returns where the fibre comes to stand */
  private stand(): Place {
    const x = movePiezo(this.stages.x, converted(this.driveX));
    const y = movePiezo(this.stages.y, converted(this.driveY));
    return {
      x: x + crossTalk.xOfY * (y - middleUm),
      y: y + crossTalk.yOfX * (x - middleUm),
    };
  }

  private get coupledMw(): number {
    if (this.watchdog.isTripped) return 0;
    const offsetUm = Math.hypot(this.fibre.x - this.bestPlace.x, this.fibre.y - this.bestPlace.y);
    const powerDbm = laser.powerDbm + this.wanderDb - tiltLossDb;
    return benchTransmission(offsetUm) * 10 ** (powerDbm / 10);
  }

  private get wanderDb(): number {
    if (!this.settings.isDrifting) return 0;
    return laser.wanderDb * Math.sin((2 * Math.PI * this.tS) / laser.periodS);
  }

  private drifted(tS: number): Place {
    return {
      x: this.home.x + drifts[0].amplitudeUm * this.swing(0, tS),
      y: this.home.y + drifts[1].amplitudeUm * this.swing(1, tS),
    };
  }

  private swing(axis: 0 | 1, tS: number): number {
    if (!this.settings.isDrifting) return 0;
    return Math.sin((2 * Math.PI * tS) / drifts[axis].periodS + (this.phases[axis] ?? 0));
  }

  /** Moves the best place by a distance between two ends in a direction that keeps it inside the travel. */
  private shiftHome([from, to]: readonly [number, number]): void {
    for (;;) {
      const distance = from + (to - from) * this.chance.uniform();
      const angle = 2 * Math.PI * this.chance.uniform();
      const x = this.home.x + distance * Math.cos(angle);
      const y = this.home.y + distance * Math.sin(angle);
      const isInside = [x, y].every((place) => Math.abs(place - middleUm) <= middleUm - marginUm);
      if (!isInside) continue;
      this.home = { x, y };
      return;
    }
  }
}

const tiltLossDb = lossDb(tiltTransmission(tilt.rad, modeRadiusUm, tilt.wavelengthUm, tilt.index));
