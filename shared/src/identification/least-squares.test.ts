import { describe, expect, it } from 'vitest';
import { fitNonlinear, type NonlinearModel } from './fit-nonlinear.js';
import { fitLinear } from './least-squares.js';

const near = (value: number, reference: number, relative: number) =>
  expect(Math.abs(value / reference - 1)).toBeLessThan(relative);

describe('linear least squares', () => {
  // JCGM 100:2008 (GUM), Annex H.3: calibration of a thermometer, t₀ = 20 °C, and its correction at 30 °C.
  it('gives the line of GUM H.3 with its uncertainties', () => {
    const t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.01, 26.511];
    const b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.16];
    const fit = fitLinear(
      t.map((value) => [1, value - 20]),
      b,
    );
    near(fit.parameters[0]!, -0.17120379, 1e-7);
    near(fit.parameters[1]!, 0.002182698, 1e-6);
    near(fit.standardErrors[0]!, 0.002877598, 1e-6);
    near(fit.standardErrors[1]!, 0.000667939, 1e-6);
    near(fit.covariance[0]![1]! / (fit.standardErrors[0]! * fit.standardErrors[1]!), -0.93043, 1e-5);
    near(fit.sigma, 0.003497564, 1e-6);
    near(fit.sumOfSquares, 1.100966e-4, 1e-6);
    const c = fit.covariance;
    near(fit.parameters[0]! + 10 * fit.parameters[1]!, -0.149377, 1e-5);
    near(Math.sqrt(c[0]![0]! + 20 * c[0]![1]! + 100 * c[1]![1]!), 0.004139, 2e-4);
  });

  // NIST StRD, linear regression, Longley (higher difficulty: nearly dependent columns): certified values.
  it('gives the certified values of Longley', () => {
    const rows = [
      [83, 234289, 2356, 1590, 107608, 1947, 60323],
      [88.5, 259426, 2325, 1456, 108632, 1948, 61122],
      [88.2, 258054, 3682, 1616, 109773, 1949, 60171],
      [89.5, 284599, 3351, 1650, 110929, 1950, 61187],
      [96.2, 328975, 2099, 3099, 112075, 1951, 63221],
      [98.1, 346999, 1932, 3594, 113270, 1952, 63639],
      [99, 365385, 1870, 3547, 115094, 1953, 64989],
      [100, 363112, 3578, 3350, 116219, 1954, 63761],
      [101.2, 397469, 2904, 3048, 117388, 1955, 66019],
      [104.6, 419180, 2822, 2857, 118734, 1956, 67857],
      [108.4, 442769, 2936, 2798, 120445, 1957, 68169],
      [110.8, 444546, 4681, 2637, 121950, 1958, 66513],
      [112.6, 482704, 3813, 2552, 123366, 1959, 68655],
      [114.2, 502601, 3931, 2514, 125368, 1960, 69564],
      [115.7, 518173, 4806, 2572, 127852, 1961, 69331],
      [116.9, 554894, 4007, 2827, 130081, 1962, 70551],
    ];
    const fit = fitLinear(
      rows.map((row) => [1, ...row.slice(0, 6)]),
      rows.map((row) => row[6]!),
    );
    const parameters = [
      -3482258.63459582, 15.0618722713733, -0.035819179292591, -2.02022980381683, -1.03322686717359,
      -0.0511041056535807, 1829.15146461355,
    ];
    const errors = [
      890420.383607373, 84.9149257747669, 0.0334910077722432, 0.488399681651699, 0.214274163161675,
      0.22607320006937, 455.478499142212,
    ];
    parameters.forEach((value, j) => near(fit.parameters[j]!, value, 1e-8));
    errors.forEach((value, j) => near(fit.standardErrors[j]!, value, 1e-8));
    near(fit.sumOfSquares, 836424.055505915, 1e-9);
  });

  it('weights by known standard errors: mean of 1 ± 1 and 4 ± 2 is 1.6 ± √0.8 (by hand)', () => {
    const fit = fitLinear([[1], [1]], [1, 4], [1, 2]);
    expect(fit.parameters[0]).toBeCloseTo(1.6, 12);
    expect(fit.standardErrors[0]).toBeCloseTo(Math.sqrt(0.8), 12);
  });

  it('says so where columns depend on each other, data are missing, or an error is 0', () => {
    expect(() =>
      fitLinear(
        [
          [1, 2],
          [2, 4],
          [3, 6],
        ],
        [1, 2, 3],
      ),
    ).toThrow(/do not determine/);
    expect(() => fitLinear([[1, 2]], [1])).toThrow(/at least 2/);
    expect(() => fitLinear([[1], [1]], [1, 2], [1, 0])).toThrow(/standardErrors\[1\]/);
  });
});

/** y = b₁(1 − e^(−b₂x)). */
const rise = (x: readonly number[]): NonlinearModel => ({
  valueAt: ([a = NaN, b = NaN], i) => -a * Math.expm1(-b * x[i]!),
  slopesAt: ([a = NaN, b = NaN], i) => [-Math.expm1(-b * x[i]!), a * x[i]! * Math.exp(-b * x[i]!)],
});

describe('nonlinear least squares', () => {
  // NIST StRD, nonlinear regression, BoxBOD (second start; from the first, far off, it ends on a plateau) and
  // Misra1a (both).
  it('gives the certified values of BoxBOD from 100, 0.75', () => {
    const fit = fitNonlinear(rise([1, 2, 3, 5, 7, 10]), [109, 149, 149, 191, 213, 224], [100, 0.75]);
    near(fit.parameters[0]!, 213.80940889, 1e-7);
    near(fit.parameters[1]!, 0.54723748542, 1e-7);
    near(fit.standardErrors[0]!, 12.354515176, 1e-6);
    near(fit.standardErrors[1]!, 0.10455993237, 1e-6);
    near(fit.sumOfSquares, 1168.0088766, 1e-9);
  });

  // The numbers of Misra1a are from memory; SciPy 1.17.1 optimize.curve_fit gives the same from them.
  it.each([
    [500, 0.0001],
    [250, 0.0005],
  ])('gives the certified values of Misra1a from %d, %d', (a, b) => {
    const x = [77.6, 114.9, 141.1, 190.8, 239.9, 289, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760];
    const y = [
      10.07, 14.73, 17.94, 23.93, 29.61, 35.18, 40.02, 44.82, 50.76, 55.05, 61.01, 66.4, 75.47, 81.78,
    ];
    const fit = fitNonlinear(rise(x), y, [a, b]);
    near(fit.parameters[0]!, 238.94212918, 1e-7);
    near(fit.parameters[1]!, 5.5015643181e-4, 1e-7);
    near(fit.standardErrors[0]!, 2.7070075241, 1e-6);
    near(fit.standardErrors[1]!, 7.2668688436e-6, 1e-6);
    near(fit.sumOfSquares, 0.12455138894, 1e-8);
  });

  it('says so where the start is impossible', () => {
    const impossible: NonlinearModel = { valueAt: () => NaN, slopesAt: () => [1] };
    expect(() => fitNonlinear(impossible, [1, 2], [1])).toThrow(/do not determine/);
  });
});
