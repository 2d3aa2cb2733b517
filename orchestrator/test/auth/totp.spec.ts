import { fromBase32 } from './from-base32.js';
import { hotp, otpauthUri, stepOfCode, timeStep, toBase32 } from '../../src/auth/totp.js';

/** The secret of both RFCs' tables. */
const secret = Buffer.from('12345678901234567890');

describe('one-time passwords', () => {
  // RFC 4226, appendix D (from memory; recomputed with node:crypto).
  it.each([
    [0, '755224'],
    [1, '287082'],
    [2, '359152'],
    [3, '969429'],
    [4, '338314'],
    [5, '254676'],
    [6, '287922'],
    [7, '162583'],
    [8, '399871'],
    [9, '520489'],
  ])('are those of the table for the counter %i', (counter, code) => {
    expect(hotp(secret, counter)).toBe(code);
  });

  // RFC 6238, appendix B, SHA-1.
  it.each([
    [59, '94287082'],
    [1_111_111_109, '07081804'],
    [1_111_111_111, '14050471'],
    [1_234_567_890, '89005924'],
    [2_000_000_000, '69279037'],
    [20_000_000_000, '65353130'],
  ])('are those of the table at %i s', (atS, code) => {
    expect(hotp(secret, timeStep(atS * 1000), 8)).toBe(code);
  });

  it('are taken one step early or late, and never a second time', () => {
    const nowMs = 1_234_567_890_000;
    const step = timeStep(nowMs);
    for (const [offset, isGood] of [
      [-2, false],
      [-1, true],
      [0, true],
      [1, true],
      [2, false],
    ] as const) {
      const found = stepOfCode(secret, hotp(secret, step + offset), nowMs, 0);
      expect(found).toBe(isGood ? step + offset : null);
    }
    expect(stepOfCode(secret, hotp(secret, step), nowMs, step)).toBeNull();
    expect(stepOfCode(secret, hotp(secret, step - 1), nowMs, step)).toBeNull();
  });

  it('have a secret in base32 as in RFC 4648, section 10', () => {
    const vectors = {
      f: 'MY',
      fo: 'MZXQ',
      foo: 'MZXW6',
      foob: 'MZXW6YQ',
      fooba: 'MZXW6YTB',
      foobar: 'MZXW6YTBOI',
    };
    for (const [text, base32] of Object.entries(vectors)) {
      expect(toBase32(Buffer.from(text))).toBe(base32);
      expect(fromBase32(base32).toString()).toBe(text);
    }
  });

  it('are handed to an authenticator by an address that keeps the account readable', () => {
    const uri = new URL(otpauthUri('test engineer', 'MZXW6'));
    expect([uri.protocol, decodeURIComponent(uri.pathname)]).toEqual([
      'otpauth:',
      '/Cresthold:test engineer',
    ]);
    expect(uri.searchParams.get('secret')).toBe('MZXW6');
  });
});
