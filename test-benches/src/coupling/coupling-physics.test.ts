import { describe, expect, it } from 'vitest';
import {
  benchAperture,
  benchTransmission,
  besselJ0,
  coupledField,
  lossDb,
  mismatchTransmission,
  modeRadiusUm,
  offsetTransmission,
  tiltTransmission,
} from './coupling-physics.js';
import { converted, converterStepV, createPiezoStage, movePiezo, travelUmPerV } from './piezo-stage.js';

const degree = Math.PI / 180;

describe('two Gaussian modes', () => {
  // D. Marcuse (1977), Bell System Technical Journal 56:703–718; figures recomputed from the closed forms for
  // w = 5.2 µm at 1550 nm.
  it.each([
    ['1 µm aside', offsetTransmission(1, 5.2), 0.16061],
    ['2 µm aside', offsetTransmission(2, 5.2), 0.64245],
    ['aside by 0.47985 radii', offsetTransmission(0.47985 * 5.2, 5.2), 1],
    ['tilted by a degree in air', tiltTransmission(degree, 5.2, 1.55, 1), 0.14695],
    ['tilted by a degree in glass', tiltTransmission(degree, 5.2, 1.55, 1.4682), 0.31678],
    ['of 5.2 and 4.6 µm', mismatchTransmission(5.2, 4.6), 0.06512],
  ])('%s lose what the closed form says', (_what, transmission, db) => {
    expect(lossDb(transmission)).toBeCloseTo(db, 4);
  });
});

describe('light through an aperture', () => {
  it('uses a Bessel function with the zeros of the tables', () => {
    // M. Abramowitz and I. A. Stegun (1964), tables 9.1 and 9.5 (from memory).
    expect(besselJ0(1)).toBeCloseTo(0.7651976866, 10);
    expect(besselJ0(2.404825557695773)).toBeCloseTo(0, 12);
    expect(besselJ0(11.79153443901428)).toBeCloseTo(0, 12);
  });

  it('of a Gaussian beam that passes whole is the overlap of two equal modes', () => {
    const open = { fill: 4, obscuration: 0, taper: 4 };
    for (const offset of [0, 0.3, 1, 2]) {
      expect(coupledField(open, offset) ** 2).toBeCloseTo(offsetTransmission(offset, 1), 6);
    }
  });

  it('couples at most 81.45 % of even light, with the aperture 1.12 mode radii wide', () => {
    // S. Shaklan and F. Roddier (1988), Applied Optics 27:2334–2338 (from memory): 0.8145 at β = 1.1209.
    const at = (fill: number) => coupledField({ fill, obscuration: 0, taper: 0 }, 0) ** 2;
    expect(at(1.1209)).toBeCloseTo(0.8145, 4);
    expect(at(1.1209)).toBeGreaterThan(at(1.11));
    expect(at(1.1209)).toBeGreaterThan(at(1.13));
  });

  it('couples past an obscuration what the closed form says', () => {
    // 2·((exp(−β²ε²) − exp(−β²)) / (β·√(1 − ε²)))², derived by hand from the same integral.
    const { fill, obscuration } = benchAperture;
    const field = Math.exp(-((fill * obscuration) ** 2)) - Math.exp(-(fill ** 2));
    const whole = 2 * (field / (fill * Math.sqrt(1 - obscuration ** 2))) ** 2;
    expect(benchTransmission(0)).toBeCloseTo(whole, 8);
    expect(lossDb(whole)).toBeCloseTo(4.7, 1);
  });
});

describe('the landscape of the bench', () => {
  const dbAt = (radii: number) => -lossDb(benchTransmission(radii * modeRadiusUm));

  it('has a peak, and rings that hold a climb', () => {
    const curve = Array.from({ length: 500 }, (_, i) => dbAt(i / 100));
    const rings = curve.flatMap((here, i) =>
      i > 0 && here > (curve[i - 1] ?? 0) && here >= (curve[i + 1] ?? 0)
        ? [{ radii: i / 100, db: here }]
        : [],
    );
    expect(curve[0]).toBe(Math.max(...curve));
    expect(rings).toHaveLength(2);
    expect(rings[0]?.db).toBeCloseTo(-14, 0);
    expect(rings[1]?.db).toBeCloseTo(-20.2, 0);
    expect(rings[0]?.radii).toBeGreaterThan(2);
    // Between them the light goes out.
    expect(Math.min(...curve.slice(100, 200))).toBeLessThan(-35);
  });
});

describe('the piezo stage', () => {
  const sweep = (from: number, to: number) =>
    Array.from({ length: 101 }, (_, i) => from + ((to - from) * i) / 100);

  it('comes back to a place by another way up than down', () => {
    const stage = createPiezoStage(0);
    let up = 0;
    for (const voltage of sweep(0, 50)) up = movePiezo(stage, voltage);
    for (const voltage of sweep(50, 100)) movePiezo(stage, voltage);
    let down = 0;
    for (const voltage of sweep(100, 50)) down = movePiezo(stage, voltage);
    // Each play lags by its half-width on either way: 2·Σ cᵢ·rᵢ.
    expect(down - up).toBeCloseTo(2 * (0.04 * 1.5 + 0.035 * 4 + 0.025 * 8), 9);
  });

  it('covers 40 µm, and little of it at first after a turn', () => {
    expect(travelUmPerV * 100).toBeCloseTo(40, 9);
    const stage = createPiezoStage(0);
    for (const voltage of sweep(0, 60)) movePiezo(stage, voltage);
    const turned = movePiezo(stage, 60);
    expect(turned - movePiezo(stage, 59)).toBeCloseTo(0.3, 9);
  });

  it('goes in steps of its converter', () => {
    expect(converted(converterStepV * 10.4)).toBeCloseTo(converterStepV * 10, 12);
  });
});
