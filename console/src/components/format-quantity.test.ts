import { describe, expect, it } from 'vitest';
import { alignNumber, formatNumber } from './format-quantity.js';

describe('numbers on the screens', () => {
  it('keep their decimals, a true minus, and a dash for what is not known', () => {
    expect(formatNumber(3, 2)).toBe('3.00');
    expect(formatNumber(-0.25, 1)).toBe('\u22120.3');
    expect(formatNumber(NaN, 2)).toBe('\u2014');
    expect(formatNumber(null, 2)).toBe('\u2014');
  });

  it('never show a minus before nothing', () => {
    expect(formatNumber(-0.001, 2)).toBe('0.00');
  });

  it('meet at the decimal point whatever their decimals', () => {
    const column = [
      alignNumber(3.21, 2, 5, 2),
      alignNumber(-412, 0, 5, 2),
      alignNumber(1200.5, 1, 5, 2),
      alignNumber(NaN, 2, 5, 2),
    ];
    expect(new Set(column.map((text) => text.length))).toEqual(new Set([8]));
    expect(column[0]?.indexOf('.')).toBe(column[2]?.indexOf('.'));
  });
});
