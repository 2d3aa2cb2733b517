import { describe, expect, it } from 'vitest';
import { seekingLaws, type SeekingLawId } from '../seeking/seeking-laws.js';
import type { SeekingInput, SeekingLaw, SeekingState } from '../seeking/seeking-law.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { sizeLaw } from './size-law.js';
import type { SizingDemands, SizingPlant } from './sizing-plant.schema.js';

const scanS = 0.1;
const noise = 0.02;
const tau = 0.5;

function plantWith(actuator: object): SizingPlant {
  return {
    scanS,
    timeConstantsS: [tau],
    noise: { sigma: noise },
    curvature: [[2]],
    actuators: [{ min: -5, max: 5, ...actuator }],
  };
}

const still = (tS: number): number => 0 * tS;

interface Course {
  /** Estimate and what was applied in each scan of the second half. */
  estimates: number[];
  applied: number[];
}

/** Seeks on −x² behind a lag, sized; `ripple` is what the plant adds to the actuator by itself. */
function seek(
  lawId: SeekingLawId,
  demands: SizingDemands,
  { actuator = {}, start = -2, ripple = still, bound = 1e6 } = {},
): Course {
  const size = sizeLaw(lawId, plantWith(actuator), demands);
  const law = seekingLaws[lawId] as unknown as SeekingLaw<object, SeekingState>;
  const state = law.init(size.parameters, [start]);
  const random = new SeededNoise(3);
  const approach = 1 - Math.exp(-scanS / tau);
  let [x, answer, slow] = [start, -start * start, start];
  const measured = [start];
  const input: SeekingInput = { objective: answer, isValid: true, measured, constraint: slow, bound };
  const course: Course = { estimates: [], applied: [] };
  const scans = Math.ceil((20 * (size.predicted.convergenceS ?? 0)) / scanS);
  for (let i = 0; i < scans; i += 1) {
    answer += approach * (-x * x - answer);
    slow += approach * (x - slow);
    input.objective = answer + noise * random.normal();
    input.constraint = slow;
    measured[0] = x;
    law.step(state, input, scanS);
    x = state.estimate[0]! + state.dither[0]! + ripple(i * scanS);
    if (i < scans / 2) continue;
    course.estimates.push(state.estimate[0]!);
    course.applied.push(x);
  }
  return course;
}

const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
const lossAllowed = 0.01;

describe('laws with a purpose of their own, sized', () => {
  it.each([0.4, -0.6])('slope seeking rests where the objective rises with %d', (slope) => {
    // −x² has the slope s at −s/2.
    const { estimates } = seek('slope', { lossAllowed, slopes: [slope] });
    expect(Math.abs(mean(estimates) + slope / 2)).toBeLessThan(0.01);
  });

  it('the constrained law goes as near to its bound as dither and noise permit, and stays on its side', () => {
    const actuator = { constraintSlope: 1 };
    const { estimates, applied } = seek(
      'constrained',
      { lossAllowed, side: 'below' },
      { actuator, bound: -0.5 },
    );
    const { amplitudes } = sizeLaw('constrained', plantWith(actuator), { lossAllowed, side: 'below' });
    // The reserve is one amplitude and a quarter.
    expect(Math.abs(mean(estimates) + 0.5 + 1.25 * amplitudes[0]!)).toBeLessThan(0.15 * amplitudes[0]!);
    expect(applied.filter((value) => value > -0.5).length / applied.length).toBeLessThan(0.01);
  });

  it.each(['gradient', 'slope', 'constrained', 'least-squares'] as const)(
    '%s climbs on the ripple that the plant has anyway, nothing injected',
    (lawId) => {
      const ripple = { amplitude: 0.1, periodS: 6.5 };
      const { estimates, applied } = seek(
        lawId,
        { lossAllowed, dither: 'measured' },
        { actuator: { ripple }, ripple: (tS: number) => 0.12 * Math.sin((2 * Math.PI * tS) / 6.5 + 1) },
      );
      expect(Math.abs(mean(estimates))).toBeLessThan(0.02);
      expect(mean(applied.map((value) => value * value))).toBeLessThan(1.2 * 0.0072);
    },
  );
});

it('sizes as the docstring says', () => {
  const plant = { scanS: 0.1, noise: { sigma: 0 }, curvature: [[2]], actuators: [{ min: -5, max: 5 }] };
  expect(sizeLaw('newton', plant, { lossAllowed: 0.005 }).amplitudes).toEqual([expect.closeTo(0.1, 12)]);
});
