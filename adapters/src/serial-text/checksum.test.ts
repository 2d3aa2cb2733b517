import { describe, expect, it } from 'vitest';
import { type ChecksumKind, withChecksum, withoutChecksum } from './checksum.js';

const rule = (kind: ChecksumKind, more: object = {}) => ({ kind, separator: '', skips: 0, ...more });

/** The two sentences that most descriptions of NMEA 0183 show; the first seen in public tests, the second from memory. */
const sentences = [
  '$GPGGA,123519,4807.038,N,01131.000,E,1,08,0.9,545.4,M,46.9,M,,*47',
  '$GPRMC,123519,A,4807.038,N,01131.000,E,022.4,084.4,230394,003.1,W*6A',
];

describe('the checksum of a sentence', () => {
  it.each(sentences)('%s is right, with noise before it too', (line) => {
    const text = line.slice(0, -3);
    expect(withoutChecksum(line, rule('nmea-xor'))).toBe(text);
    expect(withoutChecksum(`,5,1*00\x00\xff${line}`, rule('nmea-xor'))).toBe(text);
    expect(withoutChecksum(line.toLowerCase().replace(text.toLowerCase(), text), rule('nmea-xor'))).toBe(
      text,
    );
    expect(withChecksum(text, rule('nmea-xor'))).toBe(line);
  });

  it('finds every character that is another one, and every one that is missing', () => {
    for (const line of sentences) {
      for (let at = 1; at < line.length; at += 1) {
        const changed = `${line.slice(0, at)}${line[at] === '7' ? '8' : '7'}${line.slice(at + 1)}`;
        expect(withoutChecksum(changed, rule('nmea-xor'))).toHaveProperty('fault');
        const shorter = line.slice(0, at) + line.slice(at + 1);
        expect(withoutChecksum(shorter, rule('nmea-xor'))).toHaveProperty('fault');
      }
    }
  });

  it.each([
    ['GPGGA,1*7C', 'no sentence begins in it ($ or !)'],
    ['$GPGGA,1', 'it ends in no checksum'],
    ['$GPGGA,1*7', 'it ends in no checksum'],
    ['$GPGGA,1*7Cx', 'it ends in no checksum'],
    ['1*7C$GPGGA,1', 'it ends in no checksum'],
    // By hand: 47 ^ 50 ^ 47 ^ 47 ^ 41 ^ 2C ^ 31.
    ['$GPGGA,1*00', 'its checksum is 00, 4B is due'],
  ])('%s is refused: %s', (line, fault) => {
    expect(withoutChecksum(line, rule('nmea-xor'))).toEqual({ fault });
  });
});

describe('the other checksums', () => {
  // Check values of "123456789": 4B37 recomputed from MODBUS frames in print; 29B1 and 31C3 from memory of the usual
  // catalogues; the sums by hand: 9 · 0x30 + 45 = 0x1DD.
  it.each([
    ['xor-8', '31'],
    ['sum-8', 'DD'],
    ['negated-sum-8', '23'],
    ['crc-16-modbus', '4B37'],
    ['crc-16-ccitt', '29B1'],
    ['crc-16-xmodem', '31C3'],
  ] as const)('%s of "123456789" is %s', (kind, digits) => {
    expect(withChecksum('123456789', rule(kind))).toBe(`123456789${digits}`);
    expect(withoutChecksum(`123456789${digits.toLowerCase()}`, rule(kind))).toBe('123456789');
    for (let at = 0; at < 9; at += 1) {
      const changed = `${'123456789'.slice(0, at)}0${'123456789'.slice(at + 1)}${digits}`;
      expect(withoutChecksum(changed, rule(kind))).toHaveProperty('fault');
    }
  });

  it('skip characters and stand behind a separator', () => {
    const skipping = rule('sum-8', { separator: ',', skips: 1 });
    expect(withChecksum(':123456789', skipping)).toBe(':123456789,DD');
    expect(withoutChecksum(':123456789,DD', skipping)).toBe(':123456789');
    expect(withoutChecksum(':123456789;DD', skipping)).toEqual({ fault: 'it ends in no checksum' });
    expect(withoutChecksum('', skipping)).toEqual({ fault: 'it ends in no checksum' });
    expect(withoutChecksum('DD', skipping)).toEqual({ fault: 'it ends in no checksum' });
  });
});
