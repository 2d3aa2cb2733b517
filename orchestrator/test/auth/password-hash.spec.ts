import { hashPassword, isPasswordOf } from '../../src/auth/password-hash.js';

describe('password hashes', () => {
  it('look at every character, past the 72 bytes that bcrypt itself looks at', async () => {
    const stem = 'x'.repeat(100);
    const hash = await hashPassword(`${stem}a`);
    expect(await isPasswordOf(`${stem}a`, hash)).toBe(true);
    expect(await isPasswordOf(`${stem}b`, hash)).toBe(false);
  });

  it('do not stop at a zero byte', async () => {
    const hash = await hashPassword('before\0after');
    expect(await isPasswordOf('before\0other', hash)).toBe(false);
  });

  it('are bcrypt of a cost of at least 10, salted', async () => {
    const [one, other] = await Promise.all([hashPassword('same'), hashPassword('same')]);
    expect(Number(/^\$2[aby]\$(\d\d)\$/.exec(one)?.[1])).toBeGreaterThanOrEqual(10);
    expect(one).not.toBe(other);
  });
});
