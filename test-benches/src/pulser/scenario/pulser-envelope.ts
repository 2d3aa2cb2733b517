import type { EnvelopeInput } from '../../kit/scenario-input.js';

/** What holds for Pulser 1, in real seconds. The reset of the optics' protection is a person's to press. */
export const pulserEnvelope: EnvelopeInput = {
  limits: [
    {
      channel: 'drive',
      min: 10,
      max: 90,
      slewPerS: 10,
      ditherAmplitudeMax: 2,
      rest: 15,
      // Down with the pump first.
      stopCategory: 2,
      stopOrder: 0,
      readBackTolerance: 0.5,
      readBackWithinS: 2,
      whenFoundOutside: 'slew-in',
    },
    {
      channel: 'delay',
      min: 100,
      max: 600,
      slewPerS: 200,
      ditherAmplitudeMax: 20,
      rest: 300,
      stopCategory: 2,
      stopOrder: 1,
      readBackTolerance: 1,
      readBackWithinS: 2,
      whenFoundOutside: 'slew-in',
    },
  ],
  interlocks: [
    {
      id: 'laser-off',
      title: 'Laser off',
      condition: 'laserOn < 0.5',
      delayS: 0.5,
      action: 'trip',
      message: 'The laser is off: the protection of its optics has acted, or it missed the heartbeat.',
    },
    {
      id: 'energy-high',
      title: 'Pulse energy too high',
      condition: 'energy > 150',
      delayS: 0.3,
      action: 'trip',
      message: 'More than 150 mJ in a pulse: the optics are in danger from 165 mJ on.',
    },
    {
      id: 'pulse-breaks',
      title: 'Pulse breaks up',
      // Where there is no pulse yet, noise is no breaking up.
      condition: 'besideEnergy > 0.15 * mainEnergy + weight(5)',
      delayS: 1,
      action: 'warn',
      message: 'More than a seventh of the energy is beside the main pulse: take drive off.',
    },
    {
      id: 'drive-stuck',
      title: 'Supply does not follow',
      condition: 'abs(driveActual - drive) > 8',
      delayS: 3,
      action: 'trip',
      message: 'The supply is not where it was sent: check it.',
    },
  ],
  staleness: [
    { channel: 'energy', afterS: 1 },
    { channel: 'driveActual', afterS: 1 },
  ],
  // The laser's watchdog acts after 0.4 s of real time: four missed beats.
  heartbeat: { channel: 'heartbeat', periodS: 0.1 },
  overrunLimit: 20,
  serverSilenceS: 2,
};
