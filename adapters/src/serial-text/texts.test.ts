import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { renderCommand } from './command-template.js';
import { eventStatusBits, deviceErrorOf } from './device-errors.js';
import { plainText, showText, unescapeText } from './escaped-text.js';
import { formatNumberText } from './number-text.js';
import { fitsPattern } from './pattern.js';

describe('escapes', () => {
  it('stand for what cannot be typed, and come back as they were', () => {
    expect(unescapeText('\\x02R\\r\\n\\t\\\\n')).toBe('\x02R\r\n\t\\n');
    fc.assert(
      fc.property(fc.string({ unit: fc.nat(255).map((code) => String.fromCharCode(code)) }), (text) => {
        expect(plainText(showText(text, 1000))).toBe(text);
      }),
    );
  });

  it.each(['\\', 'a\\', '\\q', '\\x1', '\\xg0', '\\\\\\'])('%s is refused', (text) => {
    expect(unescapeText(text)).toBeNull();
    expect(() => plainText(text)).toThrow(RangeError);
  });

  it('are shown up to a length', () => {
    expect(showText('abc\n', 3)).toBe('abc… (4 characters)');
  });
});

describe('patterns', () => {
  it.each([
    ['0,"No error"', '0,*', true],
    ['10,"x"', '0,*', false],
    ['$GNGGA,1', '$??GGA,*', true],
    ['$GPRMC,1', '$??GGA,*', false],
    ['', '*', true],
    ['a', '', false],
    ['ab*', 'ab\\*', true],
    ['abc', 'ab\\*', false],
    ['xxaxxbxx', '*a*b*', true],
    ['xxbxxaxx', '*a*b*', false],
    ['.', '?', true],
    ['a.b', 'a.b', true],
    ['axb', 'a.b', false],
  ])('%s against %s is %s', (text, pattern, fits) => {
    expect(fitsPattern(text, pattern)).toBe(fits);
  });

  it('agree with a slow and plain matcher', () => {
    const plain = (text: string, pattern: string): boolean => {
      if (pattern === '') return text === '';
      if (pattern.startsWith('*')) {
        return plain(text, pattern.slice(1)) || (text !== '' && plain(text.slice(1), pattern));
      }
      return (
        text !== '' &&
        (pattern[0] === '?' || pattern[0] === text[0]) &&
        plain(text.slice(1), pattern.slice(1))
      );
    };
    const unit = fc.constantFrom('a', 'b', '*', '?');
    const texts = fc.string({ unit: fc.constantFrom('a', 'b'), maxLength: 10 });
    fc.assert(
      fc.property(texts, fc.string({ unit, maxLength: 8 }), (text, pattern) => {
        expect(fitsPattern(text, pattern)).toBe(plain(text, pattern));
      }),
      { numRuns: 500 },
    );
  });

  it('cannot hang on what brings a backtracking matcher to its knees', () => {
    // A matcher that tries every split of the text would need more steps than there are atoms.
    expect(fitsPattern('a'.repeat(20_000), `${'a*'.repeat(50)}b`)).toBe(false);
  });
});

describe('commands', () => {
  it('have their placeholders filled', () => {
    const filled = { channel: '2', value: '1.50' };
    expect(renderCommand('SOUR{channel}:VOLT {value}\\r', filled)).toBe('SOUR2:VOLT 1.50\r');
    expect(renderCommand('Q{channel}?', { channel: '{value}' })).toBe('Q{value}?');
  });

  it.each([
    [1.005, 'fixed', 2, '1.00'],
    [-0.001, 'fixed', 2, '0.00'],
    [1234.5, 'comma-fixed', 1, '1234,5'],
    [1234.5, 'exponent', 4, '1.2345E+3'],
    [-0, 'exponent', 1, '0.0E+0'],
    [254.6, 'hex', 0, 'FF'],
  ] as const)('write %d as %s with %d decimals: %s', (value, notation, decimals, text) => {
    expect(formatNumberText(value, notation, decimals)).toBe(text);
  });

  it.each([
    [NaN, 'fixed'],
    [Infinity, 'exponent'],
    [1e15, 'fixed'],
    [-1, 'hex'],
    [2 ** 53, 'hex'],
  ] as const)('cannot write %d as %s', (value, notation) => {
    expect(formatNumberText(value, notation, 3)).toHaveProperty('fault');
  });
});

describe('what devices say of errors', () => {
  // Bits of the event status register, IEEE 488.2, 11.5.1.
  it.each([
    ['32', 'event status 32 (command error)'],
    ['16', 'event status 16 (execution error)'],
    ['8', 'event status 8 (device-dependent error)'],
    ['4', 'event status 4 (query error)'],
    ['+48', 'event status 48 (command error, execution error)'],
    // Operation complete, request control, user request and power on are no errors.
    ['0', null],
    ['195', null],
    ['nonsense', '"nonsense", which is no event status'],
  ])('event status %s: %s', (reply, error) => {
    expect(deviceErrorOf(reply, { errorForm: 'event-status', noError: [] })).toBe(error);
    const { operationComplete, requestControl, userRequest, powerOn } = eventStatusBits;
    expect(operationComplete + requestControl + userRequest + powerOn).toBe(195);
  });

  const noError = ['0', '0,*', '+0', '+0,*'];
  it.each([
    ['0,"No error"', null],
    ['+0,"No error"', null],
    ['0', null],
    ['-113,"Undefined header"', '-113,"Undefined header"'],
    ['-222', '-222,"Data out of range"'],
    ['-350', '-350,"Queue overflow"'],
    ['-999', '-999'],
  ])('queue entry %s: %s', (reply, error) => {
    expect(deviceErrorOf(reply, { errorForm: 'queue', noError })).toBe(error);
  });
});
