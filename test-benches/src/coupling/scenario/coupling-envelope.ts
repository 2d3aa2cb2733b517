import type { EnvelopeInput } from '../../kit/scenario-input.js';

/** What holds for each piezo drive: its last volts are kept free, since a stage at its stop does not answer. */
const drive = (channel: string): EnvelopeInput['limits'][number] => ({
  channel,
  min: 2,
  max: 98,
  slewPerS: 200,
  ditherAmplitudeMax: 3,
  rest: 50,
  stopCategory: 2,
  stopOrder: 0,
  readBackTolerance: 0.1,
  readBackWithinS: 1,
  whenFoundOutside: 'slew-in',
});

/**
 * What holds for Coupling 1. A reading that does not come counts as violated: no interlock acts on one missed answer.
 */
export const couplingEnvelope: EnvelopeInput = {
  limits: [drive('driveX'), drive('driveY')],
  interlocks: [
    {
      id: 'shutter-closed',
      title: 'Shutter closed',
      condition: 'shutterOpen < 0.5',
      delayS: 1.5,
      action: 'trip',
      message: 'The shutter has closed: there is no light to couple. Find out why before the reset.',
    },
    {
      id: 'mount-watchdog',
      title: 'Watchdog of the mount',
      condition: 'watchdogFlag > 0.5',
      delayS: 1.5,
      action: 'trip',
      message: 'The mount missed the heartbeat, closed its shutter and went to rest by itself.',
    },
    {
      id: 'too-bright',
      title: 'Too much light',
      condition: 'powerDbm > 4',
      delayS: 1.5,
      action: 'trip',
      message: 'More light comes through than the laser is set to: check the attenuator.',
    },
    {
      id: 'mount-warm',
      title: 'Mount too warm',
      condition: 'mountTemp > 35',
      delayS: 5,
      action: 'stop',
      message: 'The mount is warmer than 35 °C: the alignment would not hold.',
    },
  ],
  staleness: [{ channel: 'powerDbm', afterS: 2.5 }],
  heartbeat: { channel: 'heartbeat', periodS: 0.25 },
  overrunLimit: 20,
  serverSilenceS: 2,
};
