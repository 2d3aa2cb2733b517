import { describe, expect, it } from 'vitest';
import { parseUnit } from '../units/parse-unit.js';
import { unitText } from '../units/unit.js';
import { compileExpression } from './compile-expression.js';

const units: Record<string, string> = {
  flueTemp: '°C',
  airTemp: '°C',
  rise: 'K',
  co: 'ppm',
  o2: '%',
  efficiency: '%',
  flame: '',
  power: 'kW',
  loss: 'W',
  voltage: 'V',
  drop: 'mV',
  current: 'A',
  area: 'm²',
  width: 'm',
  phase: '°',
  angle: 'rad',
  rate: '1/s',
  delay: 's',
  trim: 'counts',
  other: 'ticks',
};
const compile = (text: string) =>
  compileExpression(text, new Set([...Object.keys(units), 'unknown']), (symbol) =>
    symbol in units ? parseUnit(units[symbol] ?? '') : null,
  );
const unitOf = (text: string) => {
  const outcome = compile(text);
  if (!outcome.isOk) throw new Error(outcome.message);
  return outcome.expression.unit === null ? null : unitText(outcome.expression.unit);
};

describe('the units of an expression', () => {
  it.each([
    ['flueTemp - airTemp', 'K'],
    ['flueTemp - rise', '°C'],
    ['rise + flueTemp', '°C'],
    ['(flueTemp + airTemp) / 2', '°C'],
    ['efficiency - max(0, co - 100) / 50', '%'],
    ['efficiency - weight(0.2) * flueTemp', '%'],
    ['drop / 1000 + voltage', 'V'],
    ['voltage * current', 'V·A'],
    ['loss + voltage * current', 'W'],
    ['power * 1000 - loss', 'W'],
    ['sqrt(area) + width', 'm'],
    ['width ^ 2 + area', 'm²'],
    ['pow(width, -2)', '1/m²'],
    ['rate * delay', ''],
    ['sin(angle) + flame', ''],
    ['sin(phase * pi / 180)', ''],
    ['log10(co / 100)', ''],
    ['log10(power / weight(1))', ''],
    ['co < 400 and flueTemp > 80', ''],
    ['20 < flueTemp <= 90', ''],
    ['flame > 0.5 ? co : 0', 'ppm'],
    ['clamp(flueTemp, 0, 90)', '°C'],
    ['trim + 5', 'counts'],
    ['round(trim / 2)', 'counts'],
    ['sign(trim) * co', 'ppm'],
    ['width / delay / delay', 'm/s²'],
    ['unknown + co', 'ppm'],
  ])('%s is in "%s"', (text, unit) => expect(unitOf(text)).toBe(unit));

  it.each(['2 * 3', 'weight(2) * co', 'unknown * co', 'pi'])('%s fits any unit', (text) =>
    expect(unitOf(text)).toBeNull(),
  );

  it.each([
    ['flueTemp + co', '°C', 'ppm'],
    ['co - efficiency', '%', 'ppm'],
    ['voltage + drop', 'mV', 'V'],
    ['power - loss', 'W', 'kW'],
    ['flueTemp < co', 'ppm', '°C'],
    ['20 < flueTemp < rise', 'K', '°C'],
    ['max(o2, flueTemp)', '%', '°C'],
    ['clamp(co, 0, o2)', '%', 'ppm'],
    ['flame > 0 ? co : flueTemp', '°C', 'ppm'],
    ['trim - other', 'ticks', 'counts'],
    ['trim + flame', 'a pure number', 'counts'],
    ['efficiency - 0.2 * flueTemp', '°C', '%'],
    ['rise - flueTemp', '°C', 'K'],
    ['sin(phase)', 'sin', '°'],
    ['sin(co)', 'sin', 'ppm'],
    ['exp(flueTemp)', 'exp', '°C'],
    ['log(power)', 'log', 'kW'],
    ['2 ^ width', 'exponent', 'm'],
    ['width ^ flame', 'plain number', 'm'],
    ['weight(co)', 'weight', 'ppm'],
    ['sqrt(area) + area', 'm²', 'm'],
  ])('%s is refused, naming %s and %s', (text, one, other) => {
    const outcome = compile(text);
    expect(outcome).toMatchObject({ isOk: false, isUnitFault: true });
    expect(!outcome.isOk && outcome.message).toContain(one);
    expect(!outcome.isOk && outcome.message).toContain(other);
    expect(compileExpression(text, new Set(Object.keys(units))).isOk).toBe(true);
  });

  it('says what to do and where', () => {
    expect(compile('co + flueTemp')).toEqual({
      isOk: false,
      isUnitFault: true,
      message: '°C cannot be added to ppm: give the factor between them a unit with weight(…).',
      at: 3,
    });
    expect(compile('voltage + drop')).toMatchObject({
      message: 'mV cannot be added to V: convert one of them first.',
    });
  });

  it('does not change the value', () => {
    const outcome = compile('efficiency - weight(0.2) * flueTemp');
    expect(outcome.isOk && outcome.expression.evaluate((name) => (name === 'efficiency' ? 90 : 50))).toBe(80);
  });
});
