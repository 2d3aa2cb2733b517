import { describe, expect, it } from 'vitest';
import { perturbObserveLaw } from '../seeking/perturb-observe-law.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { sizeLaw } from './size-law.js';

const curvatures = [3, 70] as const;
const lossAllowed = 5;

const plantOf = (correlation: number) => {
  const cross = correlation * Math.sqrt(curvatures[0] * curvatures[1]);
  return {
    scanS: 0.1,
    noise: { sigma: 0 },
    curvature: [
      [curvatures[0], cross],
      [cross, curvatures[1]],
    ],
    actuators: [
      { min: -50, max: 50 },
      { min: -20, max: 20 },
    ],
  };
};

/** Mean loss once the walk has come to its end, from starts whose grids lie anywhere about the best point. */
function meanLoss(correlation: number, starts: number): number {
  const plant = plantOf(correlation);
  const { parameters, amplitudes } = sizeLaw('perturb-observe', plant, { lossAllowed });
  const random = new SeededNoise(7);
  const [[xx, xy], [, yy]] = plant.curvature as [[number, number], [number, number]];
  const scans = 2000;
  let sum = 0;
  for (let k = 0; k < starts; k += 1) {
    const start = amplitudes.map(
      (amplitude) => (Math.sign(random.normal()) * 6 + random.normal()) * amplitude,
    );
    const state = perturbObserveLaw.init(parameters, start);
    for (let i = 0; i < 2 * scans; i += 1) {
      const [x = NaN, y = NaN] = state.estimate;
      const loss = (xx * x * x + 2 * xy * x * y + yy * y * y) / 2;
      if (i >= scans) sum += loss / scans;
      perturbObserveLaw.step(state, { objective: -loss, isValid: true }, plant.scanS);
    }
  }
  return sum / starts;
}

describe('the step of perturb-and-observe on a ridge', () => {
  it.each([0, 0.5, 0.8, 0.95, -0.95])(
    'is so small that stopping early costs what is allowed, within a fifth; correlation %d',
    (correlation) => {
      const { predicted } = sizeLaw('perturb-observe', plantOf(correlation), { lossAllowed });
      expect(predicted.rippleLoss).toBeCloseTo(lossAllowed, 9);
      const loss = meanLoss(correlation, 60);
      expect(loss / lossAllowed).toBeGreaterThan(0.8);
      expect(loss / lossAllowed).toBeLessThan(1.2);
    },
  );

  it('is that of one actuator where there is no coupling, and says so where a direction is flat', () => {
    // 7/24·f''Δ² for each of two.
    const alone = sizeLaw('perturb-observe', plantOf(0), { lossAllowed });
    expect(alone.amplitudes[0]).toBeCloseTo(Math.sqrt((lossAllowed / 2) * (24 / 7 / curvatures[0])), 9);
    const flat = sizeLaw('perturb-observe', plantOf(1), { lossAllowed });
    expect(flat.amplitudes).toEqual(alone.amplitudes);
    expect(flat.remarks.join()).toContain('not positive in every direction');
  });
});
