import { describe, expect, it } from 'vitest';
import { discreteLaw } from './discrete-law.js';
import { settled } from './law.fixture.js';
import { decayRate, meansOf, simulateSeeking } from './simulate-seeking.fixture.js';

/** Re[e^{jφ}W(e^{jω})] of the washout W = (z − 1)/(z + h). */
function washoutShare(omega: number, h: number, phaseRad: number): number {
  const [re, im] = [Math.cos(omega), Math.sin(omega)];
  const below = (re + h) ** 2 + im ** 2;
  const [wRe, wIm] = [((re - 1) * (re + h) + im * im) / below, (im * (re + h) - im * (re - 1)) / below];
  return Math.cos(phaseRad) * wRe - Math.sin(phaseRad) * wIm;
}

describe('discrete-time seeking', () => {
  // Averaging of J.-Y. Choi et al. (2002): the error shrinks by 1 − γ·|f''|·Re[e^{jφ}W(e^{jω})] a scan.
  it.each([
    [10, -0.8, 0],
    [20, -0.5, 0],
    [20, -0.5, -0.3],
    [8, 0.3, -1],
  ])(
    'shrinks its error as the closed form has it: %d scans, h = %d, φ = %d',
    (scansPerPeriod, h, phaseRad) => {
      const gain = 0.001;
      const parameters = settled(discreteLaw, [{ scansPerPeriod, gain, phaseRad }], { washoutPole: h });
      const means = simulateSeeking({
        law: discreteLaw,
        parameters,
        start: [1],
        map: ([x = NaN]) => -2 * x * x,
        periodS: scansPerPeriod,
        stepsPerPeriod: scansPerPeriod,
        periods: 100,
      });
      const expected = gain * 4 * washoutShare((2 * Math.PI) / scansPerPeriod, h, phaseRad);
      const rate = decayRate(meansOf(means), 0, scansPerPeriod, 20, 80);
      expect(expected).toBeGreaterThan(0.0005);
      expect(Math.abs((1 - Math.exp(-rate)) / expected - 1)).toBeLessThan(0.03);
    },
  );
});
