import { expect, it } from 'vitest';
import { createFirstOrderFilter, stepLowPass } from '../signals/first-order-filter.js';
import { createFilterBank, resetFilterBank, stepFilterBank } from './filter-bank.js';

it('a bank of filters does what single filters do', () => {
  const corners = Float64Array.of(0.3, 5, 1e6);
  const bank = createFilterBank(corners);
  const single = Array.from(corners, () => createFirstOrderFilter());
  for (let i = 0; i < 200; i += 1) {
    if (i === 100) {
      resetFilterBank(bank);
      single.forEach((_, k) => (single[k] = createFirstOrderFilter()));
    }
    corners.forEach((_, k) => (bank.input[k] = Math.sin(i * (k + 1)) + k));
    const dtS = 0.01 * (1 + (i % 3));
    stepFilterBank(bank, dtS);
    single.forEach((filter, k) => {
      expect(bank.output[k]).toBe(stepLowPass(filter, Math.sin(i * (k + 1)) + k, corners[k] ?? NaN, dtS));
    });
  }
});
