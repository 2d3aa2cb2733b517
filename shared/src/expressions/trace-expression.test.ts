import fc from 'fast-check';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { Readings } from '../scan/readings.js';
import { parseUnit } from '../units/parse-unit.js';
import { unitText } from '../units/unit.js';
import { compileExpression } from './compile-expression.js';
import { tracePassesMax } from './compile-trace-call.js';
import type { CompiledExpression } from './expression.types.js';
import { SymbolSet } from './symbol-set.js';
import { traceFunctions } from './trace-functions.js';

const axes = new Map([
  ['wave', { title: 'Time', unit: 's', from: 0, step: 0.01 }],
  ['other', { title: 'Time', unit: 's', from: 0, step: 0.01 }],
  ['heat', { title: 'Place', unit: 'mm', from: -10, step: 5 }],
]);
const known = new SymbolSet(['o2', 'co', ...axes.keys()], axes);
const units: Record<string, string> = { o2: '%', co: 'ppm', wave: 'V', other: 'V', heat: '°C' };
const compile = (text: string) =>
  compileExpression(text, known, (symbol) => parseUnit(units[symbol] ?? 'ticks'));
/** Without units, which are a matter of their own. */
const compiled = (text: string): CompiledExpression => {
  const outcome = compileExpression(text, known);
  if (!outcome.isOk) throw new Error(outcome.message);
  return outcome.expression;
};
const message = (text: string) => {
  const outcome = compile(text);
  return outcome.isOk ? null : outcome.message;
};
const scanOf = () => {
  const readings = new Readings([...known], axes);
  readings.set(0, 4, 0);
  readings.set(1, 50, 0);
  for (const name of axes.keys()) readings.setTrace(readings.indexOf(name), [1, 2, 5, 3, 1]);
  return readings;
};
const bound = (text: string, readings: Readings) => {
  const result = new Float64Array(1);
  compiled(text).bind(readings, result)();
  return result[0];
};
const lookedUp = (text: string, readings: Readings) =>
  compiled(text).evaluate(
    Object.assign((name: string) => readings.goodValue(readings.indexOf(name)), {
      trace: (name: string) => readings.goodTrace(readings.indexOf(name)),
    }),
  );

describe('an expression over traces', () => {
  afterEach(() => vi.unstubAllGlobals());

  it.each([
    ['mean(wave) + o2', 6.4],
    ['2 * rms(wave) ^ 2 - co / 10', 11],
    ['peakAt(heat) > -5 ? highest(wave) : lowest(wave)', 5],
    ['area(wave, 0.01, o2 / 100) * 100', 9.5],
    ['valueAt((wave), 0.015)', 3.5],
    ['max(mean(wave), mean(other), o2)', 4],
    ['rmsDifference(wave, other) == 0', 1],
    ['percentile(wave, 50) + percentile(wave, o2 * 25)', 7],
  ])('%s is %d', (text, value) => {
    expect(bound(text, scanOf())).toBeCloseTo(value, 6);
    expect(lookedUp(text, scanOf())).toBeCloseTo(value, 6);
  });

  it('gives the same where generated code is forbidden', () => {
    const generated = bound('o2 > 3 ? widthAt(heat, o2 - 1) + area(heat) : mean(heat)', scanOf());
    vi.stubGlobal('Function', function () {
      throw new EvalError('refused by the policy of the page');
    });
    expect(bound('o2 > 3 ? widthAt(heat, o2 - 1) + area(heat) : mean(heat)', scanOf())).toBe(generated);
    expect(generated).toBeGreaterThan(0);
  });

  it('names its traces among its symbols, and what it costs', () => {
    const { symbols, traceSymbols, tracePasses } = compiled('mean(wave) + o2 * mean(wave) - crest(heat)');
    expect([...symbols].sort()).toEqual(['heat', 'o2', 'wave']);
    expect(traceSymbols).toEqual(['wave', 'heat']);
    expect(tracePasses).toBe(6);
  });

  it.each(traceFunctions.map((f) => [f.name, f] as const))(
    '%s has no result of a bad trace, on no way to it',
    (name, { traces, numbers }) => {
      const values = [...['wave', 'other'].slice(0, traces), ...numbers.map(() => '0')];
      const call = `${name}(${values.join(', ')})`;
      for (const text of [call, `o2 > 3 ? o2 : ${call}`, `0 * ${call}`]) {
        const readings = scanOf();
        readings.setTrace(2, [1, NaN]);
        for (const evaluate of [bound, lookedUp]) expect(evaluate(text, readings)).toBeNaN();
      }
    },
  );

  it('has no result where the source has no traces', () => {
    expect(compiled('mean(wave)').evaluate(() => 1)).toBeNaN();
    expect(bound('mean(wave)', new Readings([...known]))).toBeNaN();
    expect(bound('mean(wave)', new Readings(['o2']))).toBeNaN();
  });

  it('follows the length of its trace', () => {
    const readings = scanOf();
    const result = new Float64Array(1);
    const evaluate = compiled('count(wave) + percentile(wave, 100) + bandPower(wave, 0, 50)').bind(
      readings,
      result,
    );
    for (const points of [[1], [2, 2], [3, 3, 3], [1, 1]]) {
      readings.setTrace(2, points);
      evaluate();
      const expected = points.length === 1 ? NaN : points.length + (points[0] ?? 0);
      expect(result[0]).toEqual(expected);
    }
  });

  it('is a number or none whatever the points, alike on both ways', () => {
    const point = fc.oneof(fc.float(), fc.float({ min: -100, max: 100, noNaN: true }), fc.constant(0));
    const call = fc.constantFrom(
      ...traceFunctions.map(({ name, traces, numbers }) => {
        const values = [...['wave', 'other'].slice(0, traces), ...numbers.map((_, i) => String(i * 0.03))];
        return `${name}(${values.join(', ')})`;
      }),
    );
    fc.assert(
      fc.property(call, fc.array(point, { maxLength: 30 }), (text, points) => {
        const readings = scanOf();
        readings.setTrace(2, points);
        const value = bound(text, readings) ?? 0;
        expect(Number.isFinite(value) || Number.isNaN(value)).toBe(true);
        expect(value).toBe(lookedUp(text, readings));
      }),
      { numRuns: 500 },
    );
  });
});

describe('the types of an expression over traces', () => {
  it.each([
    'wave',
    'wave + 1',
    'wave * 2',
    '-wave',
    'wave > 3',
    'not wave',
    'o2 > 3 ? wave : other',
    'abs(wave)',
    'max(wave, o2)',
    'valueAt(wave, other)',
    'percentile(wave, heat)',
    'wave == other',
    '1 + 2 + o2 + wave',
  ])('%s is refused: a trace is no number', (text) => {
    expect(message(text)).toMatch(/is a trace, not a number: make one of it, as in mean/);
  });

  it.each([
    'mean(o2)',
    'mean(3)',
    'rms(o2 + co)',
    'peak(mean(wave))',
    'rmsDifference(wave, o2)',
    'area(1, 2, 3)',
  ])('%s is refused: a number is no trace', (text) => {
    expect(message(text)).toMatch(/takes a trace by its name, not .* Traces are: wave, other, heat\./);
  });

  it('points at the trace, and says where there is none', () => {
    expect(compile('o2 + wave')).toMatchObject({ isOk: false, at: 5 });
    const outcome = compileExpression('mean(o2)', new Set(['o2']));
    expect(outcome).toMatchObject({
      isOk: false,
      message: expect.stringContaining('no trace here') as string,
    });
  });

  it.each([
    'mean()',
    'mean(wave, 1)',
    'area(wave, 1)',
    'area(wave, 1, 2, 3)',
    'valueAt(wave)',
    'rmsDifference(wave)',
  ])('%s has the wrong number of values', (text) =>
    expect(message(text)).toMatch(/wrong number of values: write /),
  );

  it('are held to one axis for two traces', () => {
    expect(message('rmsDifference(wave, heat)')).toMatch(/different axes/);
  });

  it('are bounded in what they cost', () => {
    expect(message('bandPower(wave, 0, 1) + bandPower(wave, 1, 2)')).toBeNull();
    const often = Array.from({ length: 5 }, (_, i) => `bandPower(wave, ${i}, 9)`).join(' + ');
    expect(message(often)).toMatch(/too often for one scan/);
    fc.assert(
      fc.property(
        fc.array(fc.constantFrom('mean(wave)', 'percentile(heat, 3)', 'o2'), { minLength: 1 }),
        (terms) => {
          const outcome = compileExpression(terms.join('+'), known);
          if (outcome.isOk) expect(outcome.expression.tracePasses).toBeLessThanOrEqual(tracePassesMax);
        },
      ),
    );
  });
});

describe('the units of an expression over traces', () => {
  it.each([
    ['mean(wave)', 'V'],
    ['sd(heat)', 'K'],
    ['mean(heat)', '°C'],
    ['highest(heat) - lowest(heat)', 'K'],
    ['crest(wave) + kurtosis(wave) + count(wave)', ''],
    ['percentile(wave, 95)', 'V'],
    ['percentile(wave, o2)', 'V'],
    ['peakAt(heat)', 'mm'],
    ['centroid(wave)', 's'],
    ['widthAt(heat, peak(heat) / 2)', 'mm'],
    ['area(wave)', 'V·s'],
    ['energy(wave, 0, 0.02)', 'V²·s'],
    ['bandPower(wave, 10, 20)', 'V²'],
    ['sqrt(bandPower(wave, 1 / peakAt(wave), 20))', 'V'],
    ['valueAt(wave, peakAt(other))', 'V'],
    ['rmsDifference(wave, other)', 'V'],
  ])('%s is in "%s"', (text, unit) => {
    const outcome = compile(text);
    expect(outcome.isOk && outcome.expression.unit && unitText(outcome.expression.unit)).toBe(unit);
  });

  it.each([
    ['mean(wave) + o2', '%', 'V'],
    ['valueAt(wave, o2)', '%', 's'],
    ['area(wave, peakAt(heat), 1)', 'mm', 's'],
    ['widthAt(wave, co)', 'ppm', 'V'],
    ['bandPower(wave, peakAt(wave), 20)', 's', '1/s'],
    ['percentile(wave, peak(wave))', 'V', '%'],
    ['mean(wave) + mean(heat)', '°C', 'V'],
  ])('%s is refused, naming %s and %s', (text, one, other) => {
    const outcome = compile(text);
    expect(outcome).toMatchObject({ isOk: false, isUnitFault: true });
    expect(!outcome.isOk && outcome.message).toContain(one);
    expect(!outcome.isOk && outcome.message).toContain(other);
  });
});
