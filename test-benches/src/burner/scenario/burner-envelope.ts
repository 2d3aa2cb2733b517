import type { EnvelopeInput } from '../../kit/scenario-input.js';

/** What holds for Burner 1, in real seconds. */
export const burnerEnvelope: EnvelopeInput = {
  limits: [
    {
      channel: 'airTrim',
      min: 10,
      max: 80,
      slewPerS: 15,
      ditherAmplitudeMax: 3,
      // Much air: nothing unburnt gathers. It is where the burner's own watchdog goes as well.
      rest: 70,
      stopCategory: 2,
      stopOrder: 0,
      readBackTolerance: 0.5,
      readBackWithinS: 1,
      whenFoundOutside: 'slew-in',
    },
  ],
  interlocks: [
    {
      id: 'flame-lost',
      title: 'Flame lost',
      condition: 'flame < 0.5',
      delayS: 0.3,
      action: 'trip',
      message: 'The flame is out. Purge and relight by the burner procedure before the reset.',
    },
    {
      id: 'burner-watchdog',
      title: 'Watchdog of the burner',
      condition: 'watchdogFlag > 0.5',
      delayS: 0.3,
      action: 'trip',
      message: 'The burner missed the heartbeat and went to its safe position by itself.',
    },
    {
      id: 'co-high',
      title: 'CO too high',
      condition: 'co > 6000',
      delayS: 1,
      action: 'trip',
      message: 'Far too little air: CO is above 6000 ppm. Let the burner run at rest until CO is low.',
    },
    {
      id: 'co-rising',
      title: 'CO rising',
      condition: 'co > 2500',
      delayS: 2,
      action: 'warn',
      message: 'CO is above 2500 ppm: the air trim is near the cliff.',
    },
    {
      id: 'damper-stuck',
      title: 'Damper does not follow',
      condition: 'abs(damper - airTrim) > 8',
      delayS: 3,
      action: 'trip',
      message: 'The damper is not where it was sent: check linkage and drive.',
    },
    {
      id: 'flue-hot',
      title: 'Flue gas too hot',
      condition: 'flueTemp > 240',
      delayS: 2,
      action: 'stop',
      message: 'The flue gas is hotter than 240 °C: check the heat exchanger.',
    },
  ],
  staleness: [
    { channel: 'o2', afterS: 1 },
    { channel: 'co', afterS: 1 },
    { channel: 'flueTemp', afterS: 1 },
    { channel: 'damper', afterS: 1 },
  ],
  // The burner's watchdog acts after 0.4 s of real time: eight missed beats.
  heartbeat: { channel: 'heartbeat', periodS: 0.05 },
  overrunLimit: 20,
  serverSilenceS: 2,
};
