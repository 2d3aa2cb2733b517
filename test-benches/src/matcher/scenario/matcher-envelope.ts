import type { EnvelopeInput } from '../../kit/scenario-input.js';

/** What holds for Matcher 1, in real seconds. The generator's own reset is not in it: that is a person's to press. */
export const matcherEnvelope: EnvelopeInput = {
  limits: [
    {
      channel: 'shunt',
      min: 10,
      max: 90,
      slewPerS: 8,
      ditherAmplitudeMax: 2,
      rest: 60,
      stopCategory: 2,
      stopOrder: 0,
      readBackTolerance: 0.5,
      readBackWithinS: 2,
      whenFoundOutside: 'slew-in',
    },
    {
      channel: 'series',
      min: 20,
      max: 60,
      // Slow beside the generator's folding back, which takes half a second of bench time.
      slewPerS: 4,
      ditherAmplitudeMax: 0.5,
      rest: 30,
      stopCategory: 2,
      stopOrder: 0,
      readBackTolerance: 0.5,
      readBackWithinS: 2,
      whenFoundOutside: 'slew-in',
    },
  ],
  interlocks: [
    {
      id: 'generator-off',
      title: 'Generator off',
      condition: 'rfOn < 0.5',
      delayS: 0.3,
      action: 'trip',
      message: 'The generator is off: it tripped by reflected power, or the network missed the heartbeat.',
    },
    {
      id: 'network-watchdog',
      title: 'Watchdog of the network',
      condition: 'watchdogFlag > 0.5',
      delayS: 0.3,
      action: 'trip',
      message: 'The network missed the heartbeat, took the power off and went to its rest tuning.',
    },
    {
      id: 'reflected-high',
      title: 'Too much reflected power',
      condition: 'reflected > 280',
      delayS: 0.1,
      action: 'stop',
      message: 'More comes back than the generator holds by folding back: it would trip at 300 W.',
    },
    {
      id: 'shunt-stuck',
      title: 'Shunt capacitor does not follow',
      condition: 'abs(shuntPosition - shunt) > 5',
      delayS: 3,
      action: 'trip',
      message: 'The shunt capacitor is not where it was sent: check its motor.',
    },
    {
      id: 'series-stuck',
      title: 'Series capacitor does not follow',
      condition: 'abs(seriesPosition - series) > 3',
      delayS: 3,
      action: 'trip',
      message: 'The series capacitor is not where it was sent: check its motor.',
    },
  ],
  staleness: [
    { channel: 'forward', afterS: 1 },
    { channel: 'reflected', afterS: 1 },
  ],
  // The network's watchdog acts after 0.4 s of real time: eight missed beats.
  heartbeat: { channel: 'heartbeat', periodS: 0.05 },
  overrunLimit: 20,
  serverSilenceS: 2,
};
