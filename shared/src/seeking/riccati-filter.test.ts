import { describe, expect, it } from 'vitest';
import { applyRiccatiFilter, createRiccatiFilter, stepRiccatiFilter } from './riccati-filter.js';

const inverseOf = (filter: ReturnType<typeof createRiccatiFilter>) =>
  Array.from({ length: filter.size }, (_, k) => {
    const unit = new Float64Array(filter.size);
    unit[k] = 1;
    applyRiccatiFilter(filter, unit, unit);
    return [...unit];
  });

describe('the Riccati filter', () => {
  it('follows the closed form 1/Γ(t) = h + (1/Γ₀ − h)·e^{−ωr·t}, whatever the step', () => {
    // Separation of variables of Γ' = ωr·Γ − ωr·h·Γ²: h = 100, ωr = 1, Γ₀ = 1/400, t = 3.
    for (const steps of [1, 7, 3000]) {
      const filter = createRiccatiFilter([400], 1);
      for (let i = 0; i < steps; i += 1) stepRiccatiFilter(filter, Float64Array.of(100), 3 / steps);
      expect(inverseOf(filter)[0]?.[0]).toBeCloseTo(0.00870049, 8);
    }
  });

  it('agrees with the Riccati equation integrated by Runge and Kutta', () => {
    const h = 100;
    const slope = (g: number) => g - h * g * g;
    let gamma = 1 / 400;
    const dt = 0.001;
    for (let i = 0; i < 1500; i += 1) {
      const a = slope(gamma);
      const b = slope(gamma + (dt / 2) * a);
      const c = slope(gamma + (dt / 2) * b);
      const d = slope(gamma + dt * c);
      gamma += (dt / 6) * (a + 2 * b + 2 * c + d);
    }
    const filter = createRiccatiFilter([400], 1);
    for (let i = 0; i < 15; i += 1) stepRiccatiFilter(filter, Float64Array.of(h), 0.1);
    expect(inverseOf(filter)[0]?.[0]).toBeCloseTo(gamma, 9);
  });

  it('tends to the inverse of a matrix', () => {
    // [[100, 30], [30, 20]] has determinant 1100: inverse [[20, −30], [−30, 100]]/1100.
    const filter = createRiccatiFilter([400, 400], 1);
    for (let i = 0; i < 400; i += 1) stepRiccatiFilter(filter, Float64Array.of(100, 30, 30, 20), 0.1);
    const [first = [], second = []] = inverseOf(filter);
    expect(first[0]).toBeCloseTo(0.0181818, 7);
    expect(first[1]).toBeCloseTo(-0.0272727, 7);
    expect(second[1]).toBeCloseTo(0.0909091, 7);
  });

  it('keeps its last positive definite value where the map bends the other way', () => {
    const filter = createRiccatiFilter([2, 2], 1);
    for (let i = 0; i < 400; i += 1) stepRiccatiFilter(filter, Float64Array.of(-5, 1, 1, 3), 0.1);
    const [first = [], second = []] = inverseOf(filter);
    expect(first[0]).toBeGreaterThan(0);
    expect((first[0] ?? NaN) * (second[1] ?? NaN)).toBeGreaterThan((first[1] ?? NaN) ** 2);
    expect(stepRiccatiFilter(filter, Float64Array.of(NaN, 0, 0, 1), 0.1)).toBe(false);
  });

  it('begins at a whole matrix, or at its diagonal where the whole is not positive definite', () => {
    // H = [[100, 30], [30, 20]]: H⁻¹ = [[2/110, −3/110], [−3/110, 10/110]].
    const inverse = inverseOf(createRiccatiFilter([100, 20], 1, [[30]])).flat();
    [2 / 110, -3 / 110, -3 / 110, 10 / 110].forEach((entry, i) => expect(inverse[i]).toBeCloseTo(entry, 12));
    expect(inverseOf(createRiccatiFilter([100, 20], 1, [[50]]))).toEqual(
      inverseOf(createRiccatiFilter([100, 20], 1)),
    );
  });
});
