import { describe, expect, it } from 'vitest';
import { studentQuantile } from './student-t.js';

describe("Student's t", () => {
  // JCGM 100:2008 (GUM), table G.2, and the usual t tables (e.g. Abramowitz and Stegun 1964, table 26.10), from
  // memory: two-sided 95 %, 99 %.
  it.each([
    [1, 12.71, 63.66],
    [2, 4.3, 9.92],
    [3, 3.18, 5.84],
    [4, 2.78, 4.6],
    [5, 2.57, 4.03],
    [10, 2.23, 3.17],
    [16, 2.12, 2.92],
    [20, 2.09, 2.85],
    [30, 2.04, 2.75],
    [100, 1.98, 2.63],
    [Infinity, 1.96, 2.58],
  ])('has the table values with %d degrees of freedom', (freedom, t95, t99) => {
    expect(Math.abs(studentQuantile(0.975, freedom) - t95)).toBeLessThan(0.0051);
    expect(Math.abs(studentQuantile(0.995, freedom) - t99)).toBeLessThan(0.0051);
  });

  // GUM H.1: t of 99 % with 16 degrees of freedom, 2.9208.
  it('has the value of GUM H.1', () => {
    expect(studentQuantile(0.995, 16)).toBeCloseTo(2.9208, 4);
  });

  // Closed forms: one degree tan(π(p − ½)), two degrees (2p − 1)·√(2/(1 − (2p − 1)²)).
  it.each([0.6, 0.9, 0.975, 0.9999, 0.1])('has the closed forms of one and two degrees at %d', (p) => {
    const s = 2 * p - 1;
    expect(studentQuantile(p, 1) / Math.tan(Math.PI * (p - 0.5))).toBeCloseTo(1, 9);
    expect(studentQuantile(p, 2) / (s * Math.sqrt(2 / (1 - s * s)))).toBeCloseTo(1, 9);
  });

  it('refuses probabilities of 0 and 1', () => {
    expect(() => studentQuantile(1, 5)).toThrow(/probability/);
    expect(() => studentQuantile(0.9, 0)).toThrow(/freedom/);
    expect(studentQuantile(0.5, 3)).toBeCloseTo(0, 12);
  });
});
