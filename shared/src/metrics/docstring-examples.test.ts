import { expect, it } from 'vitest';
import { goertzel } from '../identification/goertzel.js';
import { firstOrderSettlingS } from '../identification/first-order-figures.js';
import { trialOrder } from './paired-difference.js';
import { ditherLoss } from './ripple-loss.js';
import { studentQuantile } from './student-t.js';
import { overshootShare, timeToBandS } from './transient.js';

it('says in its examples what it does', () => {
  expect(studentQuantile(0.975, 1)).toBeCloseTo(12.706204736174707, 9);
  expect(ditherLoss(0.2, 3, 'sine')).toBeCloseTo(0.03, 15);
  expect(timeToBandS([0, 1, 2, 3], [0, 8, 10, 11], 10, 1)).toBe(2);
  expect(overshootShare([0, 7, 12, 9, 10], 10)).toBeCloseTo(0.2, 15);
  expect(trialOrder(1)).toEqual(['baseline', 'seeking', 'seeking', 'baseline']);
  expect(goertzel([1, 2, 3, 4], 0)).toEqual({ re: 10, im: 0 });
  expect(firstOrderSettlingS(1, 0.02)).toBe(3.912023005428146);
});
