import { BurnerSimulation } from '../burner/burner-simulation.js';
import { efficiencyOf } from '../burner/burner-physics.js';
import { CouplingModel } from '../coupling/coupling-model.js';
import { MatcherModel } from '../matcher/matcher-model.js';
import { MixerModel } from '../mixer/mixer-model.js';
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
  objective: (read) =>
    efficiencyOf({ o2Pct: read('o2'), coPpm: read('co'), flueTempC: read('flueTemp') }, read('airTemp')),
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
  objective: (read) => read('powerDbm'),
  lossAllowed: 0.1,
  coarsePoints: 15,
  finePoints: 9,
  dwellS: 0.12,
};

/**
 * Its valley is a third of a per cent wide across and the load moves it by as much while a survey is taken: here the
 * load stands still.
 */
const matcher: SizedBench = {
  title: 'matcher',
  make: (settings) => new MatcherModel(settings),
  isDrifting: false,
  scanS: 0.02,
  actuators: [
    { name: 'shunt', min: 30, max: 56, resolution: 0.01, slewPerS: 10, driftPerS: 0 },
    { name: 'series', min: 33, max: 43, resolution: 0.01, slewPerS: 10, driftPerS: 0 },
  ],
  objective: (read) => read('forward') - read('reflected'),
  eachScan: (model) => {
    if (model.read('generatorTrip') > 0.5) model.write('generatorReset', 1);
  },
  lossAllowed: 5,
  coarsePoints: 11,
  finePoints: 6,
  dwellS: 1,
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
  objective: (read) => read('power'),
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
  objective: (read) => read('biomass'),
  lossAllowed: 0.02,
  coarsePoints: 31,
  finePoints: 11,
  dwellS: 40,
};

/** Benches that every law is identified, sized and tried on; another is one entry. */
export const sizedBenches: readonly SizedBench[] = [burner, coupling, matcher, string, mixer];
