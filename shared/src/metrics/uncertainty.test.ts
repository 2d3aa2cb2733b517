import { describe, expect, it } from 'vitest';
import { correlationMatrix, covarianceMatrix, covarianceOfMeans } from '../signals/covariance.js';
import { propagateUncertainty } from '../signals/estimate.js';

// JCGM 100:2008 (GUM), Annex H.2: simultaneous resistance and reactance; volts, amperes, radians.
const volts = [5.007, 4.994, 5.005, 4.99, 4.999];
const amperes = [0.019663, 0.019639, 0.01964, 0.019685, 0.019678];
const radians = [1.0456, 1.0438, 1.0468, 1.0428, 1.0433];
const mean = (values: readonly number[]) => values.reduce((a, b) => a + b) / values.length;
const near = (value: number, reference: number, relative: number) =>
  expect(Math.abs(value / reference - 1)).toBeLessThan(relative);

describe('covariance of means (GUM H.2)', () => {
  const covariance = covarianceOfMeans([volts, amperes, radians]);
  const correlation = correlationMatrix(covariance);

  it('has the standard deviations of the means and their correlations', () => {
    near(Math.sqrt(covariance[0]![0]!), 0.0032094, 1e-4);
    near(Math.sqrt(covariance[1]![1]!), 9.47e-6, 1e-3);
    near(Math.sqrt(covariance[2]![2]!), 7.52e-4, 1e-3);
    expect(correlation[0]![1]).toBeCloseTo(-0.355, 3);
    expect(correlation[0]![2]).toBeCloseTo(0.858, 3);
    expect(correlation[1]![2]).toBeCloseTo(-0.645, 3);
  });

  it('carries them to resistance, reactance and impedance', () => {
    const {
      results,
      standardErrors,
      covariance: spread,
    } = propagateUncertainty(
      ([v = NaN, i = NaN, phi = NaN]) => [(v / i) * Math.cos(phi), (v / i) * Math.sin(phi), v / i],
      [mean(volts), mean(amperes), mean(radians)],
      covariance,
    );
    [127.732, 219.847, 254.26].forEach((value, k) => near(results[k]!, value, 1e-5));
    [0.0711, 0.2956, 0.2363].forEach((value, k) => near(standardErrors[k]!, value, 2e-3));
    const r = correlationMatrix(spread);
    expect(r[0]![1]).toBeCloseTo(-0.588, 3);
    expect(r[0]![2]).toBeCloseTo(-0.485, 3);
    expect(r[1]![2]).toBeCloseTo(0.993, 3);
  });

  // Approach 2 of H.2.4: the results of each set of observations, averaged.
  it('agrees with the results computed set by set, to about three digits', () => {
    const sets = volts.map((v, k) => v / amperes[k]!);
    const r = sets.map((z, k) => z * Math.cos(radians[k]!));
    near(mean(r), 127.732, 1e-4);
    near(Math.sqrt(covarianceOfMeans([r])[0]![0]!), 0.0711, 1e-2);
  });
});

it('refuses series that do not match', () => {
  expect(() =>
    covarianceMatrix([
      [1, 2],
      [1, 2, 3],
    ]),
  ).toThrow(/series\[1\]/);
  expect(() => covarianceMatrix([[1]])).toThrow(/at least 2/);
});

it('carries exact numbers through without uncertainty', () => {
  const { results, standardErrors } = propagateUncertainty(([a = NaN]) => [a * a], [3], [[0]]);
  expect([results, standardErrors]).toEqual([[9], [0]]);
});
