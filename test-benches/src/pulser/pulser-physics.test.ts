import { describe, expect, it } from 'vitest';
import {
  benchOpening,
  extraction,
  fillPulse,
  pulseEnergies,
  suddenOpening,
  suddenPeakPower,
} from './pulser-physics.js';
import { pointEvery, tracePoints } from './pulse-table.js';

function pulseOf(r: number, opening = benchOpening): Float64Array {
  const points = new Float64Array(tracePoints);
  fillPulse(r, opening, pointEvery, points);
  return points;
}

/** Peaks above a share of the highest. */
function peaksOf(points: Float64Array, share: number): number {
  const least = share * Math.max(...points);
  return points.filter(
    (power, i) => power > least && power > (points[i - 1] ?? 0) && power >= (points[i + 1] ?? 0),
  ).length;
}

const energyOf = (r: number) => pulseEnergies(pulseOf(r), pointEvery);

describe('a switch that opens at once', () => {
  // The root of 1 − η = exp(−r·η), Siegman (1986), section 26.2; the same equation as that of final sizes of
  // epidemics (Kermack and McKendrick 1927), whose tables give 0.5828, 0.7968, 0.9405 for 1.5, 2, 3 (from memory).
  it.each([
    [1.5, 0.5828],
    [2, 0.7968],
    [3, 0.9405],
  ])('lets a pulse take at r = %f the share %f of the inversion', (r, eta) => {
    expect(extraction(r)).toBeCloseTo(eta, 4);
    expect(energyOf2(r).total).toBeCloseTo(r * eta, 2);
  });

  it.each([1.5, 2, 3, 4])('lets it peak at r − 1 − ln r, r = %f', (r) => {
    expect(Math.max(...pulseOf(r, suddenOpening)) / suddenPeakPower(r)).toBeCloseTo(1, 1);
    expect(Math.max(...pulseOf(r, suddenOpening))).toBeLessThanOrEqual(1.001 * suddenPeakPower(r));
  });

  // Width as energy over peak power: r·η / (r − 1 − ln r) lifetimes (Siegman, equation 26.22, from memory).
  it('makes it as wide as its energy over its peak says, to the shape of the pulse', () => {
    const r = 2;
    const points = pulseOf(r, suddenOpening);
    const half = Math.max(...points) / 2;
    const width = points.filter((power) => power > half).length * pointEvery;
    const published = (r * extraction(r)) / suddenPeakPower(r);
    expect(width / published).toBeGreaterThan(0.8);
    expect(width / published).toBeLessThan(1.05);
  });

  it('never makes more than one', () => {
    for (let r = 1.4; r <= 5; r += 0.4) expect(peaksOf(pulseOf(r, suddenOpening), 0.02)).toBe(1);
  });

  function energyOf2(r: number) {
    return pulseEnergies(pulseOf(r, suddenOpening), pointEvery);
  }
});

describe('the switch of the bench, which opens slowly', () => {
  it('breaks the pulse in two where there is much gain, while the energy goes on rising', () => {
    expect(peaksOf(pulseOf(3), 0.05)).toBe(1);
    expect(peaksOf(pulseOf(4), 0.05)).toBe(2);
    let before = 0;
    for (let r = 1.3; r <= 5; r += 0.1) {
      const { total } = energyOf(r);
      expect(total).toBeGreaterThan(before);
      before = total;
    }
  });

  it('has a cliff in its clean energy: the best is just before it', () => {
    const clean = (r: number) => 2 * energyOf(r).main - energyOf(r).total;
    const rs = Array.from({ length: 36 }, (_, i) => 1.5 + i / 10);
    const best = rs.reduce((top, r) => (clean(r) > clean(top) ? r : top));
    expect(best).toBeGreaterThan(3);
    expect(best).toBeLessThan(3.6);
    expect(clean(best) - clean(best + 0.5)).toBeGreaterThan(5 * (clean(best) - clean(best - 0.5)));
  });

  it('takes no more out than was stored', () => {
    for (let r = 1.2; r <= 5; r += 0.2) expect(energyOf(r).total).toBeLessThan(r);
  });
});
