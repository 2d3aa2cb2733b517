import type { EnvelopeInput } from '../../kit/scenario-input.js';

/**
 * What holds for String 1. A reading that does not come counts as violated, and one missed reply costs the serial
 * line up to a second: no interlock acts within that.
 */
export const stringEnvelope: EnvelopeInput = {
  limits: [
    {
      channel: 'voltageSetpoint',
      // Below 20 V all cells in the shade would be bypassed and carry the whole current as heat.
      min: 20,
      max: 190,
      slewPerS: 120,
      ditherAmplitudeMax: 5,
      // About the open-circuit voltage of the warm string: it gives next to nothing there.
      rest: 190,
      stopCategory: 2,
      stopOrder: 0,
      readBackTolerance: 0.5,
      readBackWithinS: 1,
      whenFoundOutside: 'slew-in',
    },
  ],
  interlocks: [
    {
      id: 'converter-off',
      title: 'Converter off',
      condition: 'running < 0.5',
      delayS: 1.5,
      action: 'trip',
      message: 'The converter has let go of the string. Find out why before the reset.',
    },
    {
      id: 'converter-watchdog',
      title: 'Watchdog of the converter',
      condition: 'watchdogFlag > 0.5',
      delayS: 1.5,
      action: 'trip',
      message: 'The converter missed the heartbeat and let go of the string by itself.',
    },
    {
      id: 'over-current',
      title: 'Over-current',
      condition: 'current > 9.5',
      delayS: 1.5,
      action: 'trip',
      message: 'More current than the modules can give: a short circuit, or another string feeds in.',
    },
    {
      id: 'over-voltage',
      title: 'Over-voltage',
      condition: 'voltage > 215',
      delayS: 1.5,
      action: 'trip',
      message: 'More voltage than the modules have: the string is not wired as it should be.',
    },
    {
      id: 'cells-hot',
      title: 'Cells too hot',
      condition: 'cellTemp > 85',
      delayS: 5,
      action: 'stop',
      message: 'The cells are hotter than 85 °C: look for a hot spot.',
    },
  ],
  staleness: [
    { channel: 'voltage', afterS: 2.5 },
    { channel: 'current', afterS: 2.5 },
    { channel: 'power', afterS: 2.5 },
  ],
  heartbeat: { channel: 'heartbeat', periodS: 0.25 },
  overrunLimit: 20,
  serverSilenceS: 2,
};
