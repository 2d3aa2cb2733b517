import { describe, expect, it } from 'vitest';
import { createFirstOrderFilter, stepLowPass, stepWashout } from './first-order-filter.js';

/** Amplitude and phase of the response to a sine, by lock-in over whole periods. */
function response(step: typeof stepLowPass, cornerRatio: number): { size: number; phaseDeg: number } {
  const perPeriod = 400;
  const dtS = 1 / perPeriod;
  const state = createFirstOrderFilter();
  let inPhase = 0;
  let quadrature = 0;
  const periods = 60;
  for (let i = 0; i < periods * perPeriod; i += 1) {
    const angle = 2 * Math.PI * i * dtS;
    const output = step(state, Math.sin(angle), 2 * Math.PI * cornerRatio, dtS);
    if (i < (periods - 10) * perPeriod) continue;
    inPhase += (output * Math.sin(angle) * 2) / (10 * perPeriod);
    quadrature += (output * Math.cos(angle) * 2) / (10 * perPeriod);
  }
  return {
    size: Math.hypot(inPhase, quadrature),
    phaseDeg: (Math.atan2(quadrature, inPhase) * 180) / Math.PI,
  };
}

describe('first-order filters', () => {
  // 1/(1+jωτ): ωτ = 1 → −3.0103 dB, −45°; 2 → −6.9897 dB, −63.435°; 0.5 → −0.9691 dB, −26.565° (closed form).
  it.each([
    [1, -3.0103, -45],
    [0.5, -6.9897, -63.435],
    [2, -0.9691, -26.565],
  ])('low-pass with corner ratio %d has the gain and phase of the continuous one', (ratio, db, phaseDeg) => {
    const measured = response(stepLowPass, ratio);
    expect(20 * Math.log10(measured.size)).toBeCloseTo(db, 2);
    expect(measured.phaseDeg).toBeCloseTo(phaseDeg, 1);
  });

  it('washout leads by 45° at its corner', () => {
    const measured = response(stepWashout, 1);
    expect(20 * Math.log10(measured.size)).toBeCloseTo(-3.0103, 2);
    expect(measured.phaseDeg).toBeCloseTo(45, 1);
  });

  it('starts at rest on its first input', () => {
    const state = createFirstOrderFilter();
    expect(stepWashout(state, 7, 1, 0.1)).toBe(0);
    expect(state.low).toBe(7);
  });
});
