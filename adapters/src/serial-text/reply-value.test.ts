import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseNumberText } from './number-text.js';
import { listOfReply, samplesOfBlock, valueOfReply } from './reply-value.js';
import { type SerialTextAddressInput, serialTextAddressSchema } from './serial-text-address.schema.js';

const address = (more: SerialTextAddressInput) => serialTextAddressSchema.parse({ query: 'Q?', ...more });

describe('the value of a reply', () => {
  it.each<[reply: string, more: SerialTextAddressInput, value: number]>([
    ['+1.25000E+00', {}, 1.25],
    ['-.5', {}, -0.5],
    ['7.', {}, 7],
    ['  42 ', {}, 42],
    ['VOLT 1.25 V', { prefix: 'VOLT ', suffix: ' V' }, 1.25],
    ['\x021.5\x03', { prefix: '\\x02', suffix: '\\x03' }, 1.5],
    ['1,25', { notation: 'comma-decimal', separator: ';' }, 1.25],
    ['1;2,5;3', { notation: 'comma-decimal', separator: ';', field: 1 }, 2.5],
    ['#H1F', { notation: 'hex' }, 31],
    ['0xff', { notation: 'hex' }, 255],
    ['1F', { notation: 'hex' }, 31],
    ['a  12   34', { separator: ' ', field: 2 }, 34],
    ['20', { scale: 0.5, offset: 10 }, 20],
    ['ON', { words: { ON: 1, OFF: 0 } }, 1],
    ['OFF', { words: { ON: 1, OFF: 0 }, scale: 2, offset: 3 }, 3],
  ])('%o with %o is %d', (reply, more, value) => {
    expect(valueOfReply(reply, address(more))).toBe(value);
  });

  // SCPI-1999, volume 1, 7.2.1.4 and 7.2.1.5 (from memory): infinity is 9.9E37, not a number 9.91E37.
  it.each(['9.91E37', '+9.910000E+37', '9.9E37', '-9.90E+37', 'NAN', 'nan', '-inf'])(
    '%s says "no value now"',
    (reply) => {
      expect(valueOfReply(reply, address({}))).toBeNaN();
    },
  );

  it('takes special replies of the device, also an empty field', () => {
    expect(valueOfReply('OVLD', address({ specials: ['OVLD'] }))).toBeNaN();
    expect(valueOfReply('$GPGGA,,', address({ field: 1, specials: [''] }))).toBeNaN();
    expect(valueOfReply('0', address({ specials: [''] }))).toBe(0);
  });

  it.each(['', '1.2.3', '1e', '--1', '1 2', '0x10', '1,5', 'Infinity', '1e999', '１', `${'1'.repeat(41)}`])(
    '%o is no number',
    (reply) => {
      expect(valueOfReply(reply, address({ separator: ';' }))).toHaveProperty('fault');
    },
  );

  it.each<[reply: string, more: SerialTextAddressInput, fault: string]>([
    ['1.5', { prefix: 'V' }, 'it does not begin with "V"'],
    ['1.5', { suffix: 'V' }, 'it does not end with "V"'],
    ['V', { prefix: 'V', suffix: 'V' }, 'it does not end with "V"'],
    ['1,2', { field: 2 }, 'it has no field 2'],
    ['1,x', { field: 1 }, 'field 1, "x", is no number of the notation decimal'],
    ['5,Q', { signField: 1 }, 'field 1, "Q", is none of N, E, S, W'],
  ])('%o with %o is none: %s', (reply, more, fault) => {
    expect(valueOfReply(reply, address(more))).toEqual({ fault });
  });

  it('of a position has its sign from the next field', () => {
    // 48° 7.038' is 48.1173°, 11° 31' is 11.51666…°.
    const at = { notation: 'degrees-minutes', field: 0, signField: 1 } as const;
    expect(valueOfReply('4807.038,N', address(at))).toBeCloseTo(48.1173, 9);
    expect(valueOfReply('4807.038,S', address(at))).toBeCloseTo(-48.1173, 9);
    expect(valueOfReply('01131.000,W', address(at))).toBeCloseTo(-11.516666667, 8);
    expect(valueOfReply('4860.000,N', address(at))).toHaveProperty('fault');
    expect(valueOfReply(',', address({ ...at, specials: [''] }))).toBeNaN();
  });
});

it('every number that a program prints is read as that number', () => {
  fc.assert(
    fc.property(fc.double({ noNaN: true, min: -1e300, max: 1e300 }), fc.nat(20), (any, digits) => {
      // Programs print -0 as 0.
      const value = any + 0;
      expect(parseNumberText(String(value), 'decimal')).toBe(value);
      expect(parseNumberText(value.toExponential(), 'decimal')).toBe(value);
      const text = value.toExponential(digits);
      expect(parseNumberText(text.replace('.', ','), 'comma-decimal')).toBe(Number(text));
    }),
  );
});

describe('a trace', () => {
  it('of 512 points on one line is read in order', () => {
    const into = new Float64Array(512);
    const reply = Array.from({ length: 512 }, (_, point) => (point / 4).toExponential(5)).join(',');
    expect(listOfReply(`CURV,${reply}`, address({ shape: 'list', points: 512, field: 1 }), into)).toBeNull();
    expect(into[511]).toBe(127.75);
  });

  it.each([
    ['1,2', 'it has 2 points, not 3'],
    ['1,2,3,4', 'it has 4 points, not 3'],
    ['1,,3', 'field 1, "", is no number of the notation decimal'],
  ])('of %s is refused: %s', (reply, fault) => {
    expect(listOfReply(reply, address({ shape: 'list', points: 3 }), new Float64Array(3))).toEqual({ fault });
  });

  it.each<[SerialTextAddressInput['sampleType'], 'big' | 'little', string, number[]]>([
    // IEEE 754: 1.0 is 3F800000, -2 is C0000000, 100.25 is 42C88000.
    ['f32', 'big', '3f800000c000000042c88000', [1, -2, 100.25]],
    ['f32', 'little', '0000803f000000c00080c842', [1, -2, 100.25]],
    ['i16', 'big', 'ffff7fff8000', [-1, 32_767, -32_768]],
    ['u16', 'little', '0100ff00ffff', [1, 255, 65_535]],
    ['i8', 'big', 'ff7f80', [-1, 127, -128]],
    ['u8', 'big', 'ff7f80', [255, 127, 128]],
    ['i32', 'big', 'ffffffff7fffffff80000000', [-1, 2_147_483_647, -2_147_483_648]],
    ['u32', 'little', '01000000ffffffff00000080', [1, 4_294_967_295, 2_147_483_648]],
    ['f64', 'big', '3ff0000000000000c0000000000000004059100000000000', [1, -2, 100.25]],
  ])('as a block of %s, %s end first', (sampleType, byteOrder, hex, values) => {
    const into = new Float64Array(3);
    const block = address({ shape: 'block', points: 3, sampleType, byteOrder });
    expect(samplesOfBlock(Buffer.from(hex, 'hex'), block, into)).toBeNull();
    expect([...into]).toEqual(values);
    expect(samplesOfBlock(Buffer.from(`${hex}00`, 'hex'), block, into)).toHaveProperty('fault');
  });
});
