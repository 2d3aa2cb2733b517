import { describe, expect, it } from 'vitest';
import { DomainError } from '../errors/domain-error.js';
import { planDithers, type DitherRequest } from './plan-dithers.js';

const request = (change: Partial<DitherRequest> = {}): DitherRequest => ({
  actuators: 3,
  law: 'newton',
  scanS: 0.01,
  lowestHz: 0.5,
  highestHz: 10,
  apartHz: 0.1,
  windowS: 10,
  ...change,
});
const refusal = (change: Partial<DitherRequest>) => {
  try {
    planDithers(request(change));
  } catch (error) {
    if (error instanceof DomainError) return error.toRecord();
  }
  throw new Error('There is a plan.');
};

describe('a dither plan', () => {
  it('takes the slowest dithers that keep apart, with whole periods in the window', () => {
    const plan = planDithers(request());
    expect(plan.multiples).toEqual([5, 6, 8]);
    expect(plan.windowScans).toBe(1000);
    expect(plan.frequenciesHz).toEqual([0.5, 0.6, 0.8].map((hz) => expect.closeTo(hz, 12) as number));
    expect(plan.apartHz).toBeCloseTo(0.1, 12);
  });

  it('is as the docstring says', () => {
    const two = {
      actuators: 2,
      law: 'newton' as const,
      scanS: 0.1,
      lowestHz: 0.2,
      highestHz: 1,
      apartHz: 0.1,
      windowS: 10,
    };
    expect(planDithers(two).frequenciesHz.map((hz) => Number(hz.toFixed(9)))).toEqual([0.2, 0.5]);
  });

  it('keeps clear of mains and resonance', () => {
    const plan = planDithers(request({ forbidden: [{ fromHz: 0.45, toHz: 1.25 }] }));
    expect(Math.min(...plan.frequenciesHz)).toBeGreaterThan(1.25);
    const differences = plan.frequenciesHz.map((hz) => hz - (plan.frequenciesHz[0] ?? NaN)).slice(1);
    for (const hz of differences) expect(hz < 0.45 || hz > 1.25).toBe(true);
  });

  it('finds sixteen for either law', () => {
    for (const law of ['gradient', 'newton'] as const) {
      const plan = planDithers(request({ actuators: 16, law, windowS: 1000, apartHz: 0.001 }));
      expect(plan.frequenciesHz).toHaveLength(16);
    }
  });

  it.each<[string, Partial<DitherRequest>, string]>([
    ['the scan is too slow', { scanS: 1 }, 'lowestHz'],
    ['the window is no whole number of scans', { windowS: 9.995 }, 'windowS'],
    ['the window has no whole period of any', { windowS: 0.01, scansPerPeriodMin: 4 }, 'windowS'],
    ['all is forbidden', { forbidden: [{ fromHz: 0, toHz: 100 }] }, 'apartHz'],
    ['the lines are to be too far apart', { apartHz: 4 }, 'apartHz'],
    ['there are none', { actuators: 0 }, 'actuators'],
    ['the range is upside down', { lowestHz: 11 }, 'lowestHz'],
    ['something is no number', { scanS: NaN }, 'scanS'],
  ])('is refused where %s, naming the field', (_, change, field) => {
    const { code, details } = refusal(change);
    expect(code).toBe('analysis.invalid-input');
    expect(details.map((detail) => detail.field)).toContain(field);
  });

  it('says how many fit and what to do', () => {
    expect(refusal({ actuators: 16 }).message).toMatch(/of 16 fit.*widen the range/);
  });
});
