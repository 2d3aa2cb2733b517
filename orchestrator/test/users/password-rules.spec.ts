import { statSync } from 'node:fs';
import { resolve } from 'node:path';
import { isPasswordOf, hashPassword } from '../../src/auth/password-hash.js';
import { commonPasswords } from '../../src/users/common-passwords.js';
import { checkNewPassword, lengthOf } from '../../src/users/password-rules.js';

const context = {
  account: 'm.keeper',
  words: ['Test Engineer', 'Brackwater Test Station'],
  hasSecondFactor: false,
};
const isTaken = (password: string, hasSecondFactor = false) => {
  try {
    checkNewPassword(password, { ...context, hasSecondFactor });
    return true;
  } catch {
    return false;
  }
};

describe('a new password', () => {
  // NIST SP 800-63B-4, section 3.1.1.2: 15 characters alone, 8 beside a factor, at least 64 taken, no composition.
  it('is judged by length, not by composition', () => {
    expect(isTaken('x'.repeat(3) + ' owls and kites')).toBe(true);
    expect(isTaken('fourteen owlsX')).toBe(false);
    expect(isTaken('fifteen owls XY')).toBe(true);
    expect(isTaken('owl kite', true)).toBe(true);
    expect(isTaken('owl kit', true)).toBe(false);
    expect(isTaken('the quick owl and the slow kite met on a long pier '.repeat(4))).toBe(true);
  });

  it('has each code point counted once, whatever way it is typed', async () => {
    expect(lengthOf('ﬁve')).toBe(4);
    expect(lengthOf('🦉🪁')).toBe(2);
    expect(lengthOf('e\u0301')).toBe(1);
    expect(isTaken('🦉🪁⛵🌊🐚🦀🐠🐟🐙🦑🪸🐋🐬🦭🚢')).toBe(true);
    const hash = await hashPassword('caf\u00e9 by the old pier');
    expect(await isPasswordOf('cafe\u0301 by the old pier', hash)).toBe(true);
  });

  it.each([
    'password1234567',
    '!!!Password!!!!!!',
    'dragondragondragon',
    '123456789012345',
    'abcdefghijklmnop',
    'aaaabbbbaaaabbbb',
    'm.keeper20261201',
    'brackwater-station-1',
    'Cresthold 2026!!!',
    'testengineer12345',
  ])('must not be %s', (password) => {
    expect(isTaken(password)).toBe(false);
  });

  it('may hold a name of the station among enough else', () => {
    expect(isTaken('brackwater trial seven')).toBe(true);
  });

  it('is compared with a list that is long enough and small enough to ship', () => {
    expect(commonPasswords.size).toBeGreaterThanOrEqual(3000);
    const file = resolve('src/users/common-passwords.ts');
    expect(statSync(file).size).toBeLessThanOrEqual(64 * 1024);
  });
});
