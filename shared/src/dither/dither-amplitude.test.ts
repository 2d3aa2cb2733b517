import { describe, expect, it } from 'vitest';
import { sizeAmplitude, type AmplitudeBounds } from './dither-amplitude.js';

const bounds = (change: Partial<AmplitudeBounds> = {}): AmplitudeBounds => ({
  resolution: 0.1,
  noise: 0,
  scansAveraged: 64,
  slopeToSee: 1,
  amplitudeMax: 2,
  slewPerS: 100,
  periodS: 5,
  curvature: 0.04,
  lossAllowed: 0.01,
  ...change,
});

describe('the amplitude of a dither', () => {
  it('is the largest that costs no more than is allowed', () => {
    expect(sizeAmplitude(bounds())).toEqual({ amplitude: 1, limitedBy: 'loss', margin: 2.5 });
  });

  it('stays within envelope and slew', () => {
    expect(sizeAmplitude(bounds({ amplitudeMax: 0.7 }))).toMatchObject({
      amplitude: 0.7,
      limitedBy: 'envelope',
    });
    const slow = sizeAmplitude(bounds({ slewPerS: 1 }));
    expect(slow).toMatchObject({ limitedBy: 'slew' });
    expect((slow.amplitude * 2 * Math.PI) / 5).toBeCloseTo(1, 12);
  });

  // Variance of the least-squares slope 2σ²/(N·a²): σ = 0.3, N = 64, a = 0.2 gives 0.0703125.
  it('lets the slope stand out of the noise as least squares would have it', () => {
    const { margin } = sizeAmplitude(bounds({ noise: 0.3, slopeToSee: Math.sqrt(0.0703125), resolution: 0 }));
    expect(margin).toBeCloseTo(1 / 0.2, 9);
  });

  it('is refused where the bounds contradict, naming both and what to do', () => {
    expect(() => sizeAmplitude(bounds({ resolution: 0.5, lossAllowed: 0.0001 }))).toThrow(
      'at least 2 (4 steps of the actuator) and at most 0.1 (the loss that is allowed): allow more loss, or use an actuator with finer steps.',
    );
    expect(() => sizeAmplitude(bounds({ amplitudeMax: 0 }))).toThrow('have a larger dither approved');
  });
});
