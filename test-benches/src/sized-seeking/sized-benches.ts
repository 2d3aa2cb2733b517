import { BurnerSimulation } from '../burner/burner-simulation.js';
import { efficiencyOf } from '../burner/burner-physics.js';
import { CouplingModel } from '../coupling/coupling-model.js';
import { MatcherModel } from '../matcher/matcher-model.js';
import { MixerModel } from '../mixer/mixer-model.js';
import { PulserModel } from '../pulser/pulser-model.js';
import { pulserObjective } from '../pulser/scenario/pulser-experiment.js';
import { pulserRig } from '../pulser/scenario/pulser-rig.js';
import { shippedObjective } from './shipped-objective.js';
import { ripple, StringModel } from '../string/string-model.js';
import type { SizedBench } from './sized-bench.js';

const burner: SizedBench = {
  title: 'burner',
  make: (settings) => new BurnerSimulation(settings),
  isDrifting: true,
  scanS: 0.25,
  actuators: [
    // 2 % with a period of 1200 s.
    { name: 'airTrim', min: 10, max: 50, resolution: 0.01, slewPerS: 5, driftPerS: (2 * 2 * Math.PI) / 1200 },
  ],
  objective: (model) =>
    efficiencyOf(
      { o2Pct: model.read('o2'), coPpm: model.read('co'), flueTempC: model.read('flueTemp') },
      model.read('airTemp'),
    ),
  lossAllowed: 0.014,
  coarsePoints: 15,
  finePoints: 15,
  dwellS: 4,
};

const coupling: SizedBench = {
  title: 'coupling',
  make: (settings) => new CouplingModel(settings),
  isDrifting: true,
  scanS: 0.02,
  actuators: ['driveX', 'driveY'].map((name) => ({
    name,
    min: 0,
    max: 100,
    resolution: 0.01,
    slewPerS: null,
    // 2.5 µm with a period of 420 s, at 0.4 µm/V.
    driftPerS: (2.5 / 0.4) * ((2 * Math.PI) / 420),
  })),
  objective: (model) => model.read('powerDbm'),
  lossAllowed: 0.1,
  coarsePoints: 15,
  finePoints: 9,
  dwellS: 0.12,
};

/**
 * Its valley is a third of a per cent wide across, and the load moves it by as much in a minute: a survey must be quick.
 * An operator resets the generator where a survey tripped it.
 */
const matcher: SizedBench = {
  title: 'matcher',
  make: (settings) => new MatcherModel(settings),
  isDrifting: true,
  scanS: 0.02,
  actuators: [
    // Steepest of the best tuning over a whole swing of the load's resistance (3600 s) and reactance (2600 s).
    { name: 'shunt', min: 30, max: 56, resolution: 0.01, slewPerS: 10, driftPerS: 0.011 },
    { name: 'series', min: 33, max: 43, resolution: 0.01, slewPerS: 10, driftPerS: 0.007 },
  ],
  objective: (model) => model.read('forward') - model.read('reflected'),
  eachScan: (model) => {
    if (model.read('generatorTrip') > 0.5) model.write('generatorReset', 1);
  },
  lossAllowed: 5,
  coarsePoints: 11,
  finePoints: 6,
  dwellS: 0.5,
};

/** In steady light; the converter's own ripple stays, and the dithers keep off it. */
const string: SizedBench = {
  title: 'string',
  make: (settings) => new StringModel({ ...settings, profile: 'steady' }),
  isDrifting: true,
  scanS: 0.05,
  actuators: [
    // Cells that heat up by 34 K in about 240 s lower the best voltage by 0.4 V/K.
    { name: 'voltageSetpoint', min: 90, max: 180, resolution: 0.01, slewPerS: null, driftPerS: 0.01 },
  ],
  objective: (model) => model.read('power'),
  ripples: [{ amplitude: ripple.amplitudeV, periodS: ripple.periodS }],
  forbidden: [{ fromHz: 0.8 / ripple.periodS, toHz: 1.25 / ripple.periodS }],
  lossAllowed: 2,
  coarsePoints: 19,
  finePoints: 15,
  dwellS: 2,
};

const mixer: SizedBench = {
  title: 'mixer',
  make: (settings) => new MixerModel(settings),
  isDrifting: true,
  scanS: 0.5,
  actuators: [
    {
      name: 'distributor',
      min: 5,
      max: 95,
      resolution: 0.01,
      slewPerS: 10,
      driftPerS: (0.7 * 2 * Math.PI) / 1300,
    },
  ],
  objective: (model) => model.read('biomass'),
  lossAllowed: 0.02,
  coarsePoints: 31,
  finePoints: 11,
  dwellS: 40,
};

/**
 * A scan every fifth pulse, as its rig has it. Whoever surveys it loses the pulse beyond the cliff and resets the
 * protection; the dwell has time for the supply to come back from rest.
 */
const pulser: SizedBench = {
  title: 'pulser',
  make: (settings) => new PulserModel(settings),
  isDrifting: true,
  scanS: 0.5,
  actuators: [
    // 8 % of the inversion with a period of 1400 s, at a best of 68 %.
    {
      name: 'drive',
      min: 40,
      max: 88,
      resolution: 0.01,
      slewPerS: 2,
      driftPerS: (0.08 * 68 * 2 * Math.PI) / 1400,
    },
    // 25 µs with a period of 1000 s.
    {
      name: 'delay',
      min: 150,
      max: 550,
      resolution: 0.1,
      slewPerS: 40,
      driftPerS: (25 * 2 * Math.PI) / 1000,
    },
  ],
  objective: shippedObjective(pulserRig({ host: '127.0.0.1', port: 1 }), pulserObjective),
  eachScan: (model) => {
    if (model.read('protectionTrip') > 0.5) model.write('protectionReset', 1);
  },
  lossAllowed: 2.2,
  coarsePoints: 9,
  finePoints: 7,
  dwellS: 2,
};

/** Benches that every law is identified, sized and tried on; another is one entry. */
export const sizedBenches: readonly SizedBench[] = [burner, coupling, matcher, string, mixer, pulser];
