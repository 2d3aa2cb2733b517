import type { EnvelopeInput } from '../../kit/scenario-input.js';

/** What holds for Mixer 1, in real seconds. */
export const mixerEnvelope: EnvelopeInput = {
  limits: [
    {
      channel: 'distributor',
      // Wholly at the first or the last tank that tank is washed out, whatever else happens.
      min: 4,
      max: 96,
      slewPerS: 10,
      ditherAmplitudeMax: 3,
      rest: 15,
      stopCategory: 2,
      stopOrder: 0,
      readBackTolerance: 0.5,
      readBackWithinS: 1,
      whenFoundOutside: 'slew-in',
    },
  ],
  interlocks: [
    {
      id: 'pump-stopped',
      title: 'Feed pump stopped',
      condition: 'pumpRunning < 0.5',
      delayS: 1.5,
      action: 'trip',
      message: 'The feed pump stands: the cultures live on what they have. Find out why before the reset.',
    },
    {
      id: 'mixer-watchdog',
      title: 'Watchdog of the mixer',
      condition: 'watchdogFlag > 0.5',
      delayS: 1.5,
      action: 'trip',
      message: 'The mixer missed the heartbeat, stopped the feed and went to rest by itself.',
    },
    {
      id: 'washed-out',
      title: 'Cultures washed out',
      condition: 'biomass < 0.2',
      delayS: 20,
      action: 'stop',
      message: 'Hardly any biomass comes out: the tanks are washed out. Let them grow at rest.',
    },
    {
      id: 'distributor-stuck',
      title: 'Distributor does not follow',
      condition: 'abs(position - distributor) > 10',
      delayS: 3,
      action: 'trip',
      message: 'The distributor is not where it was sent: check its drive.',
    },
    {
      id: 'culture-warm',
      title: 'Cultures too warm',
      condition: 'cultureTemp > 36',
      delayS: 5,
      action: 'stop',
      message: 'The cultures are warmer than 36 °C: check the cooling.',
    },
  ],
  staleness: [
    { channel: 'biomass', afterS: 2 },
    { channel: 'substrate', afterS: 2 },
    { channel: 'position', afterS: 2 },
  ],
  // The mixer's watchdog acts after 0.4 s of real time: four missed beats.
  heartbeat: { channel: 'heartbeat', periodS: 0.1 },
  overrunLimit: 20,
  serverSilenceS: 2,
};
