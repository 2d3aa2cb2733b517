import { DomainError } from '@cresthold/shared';
import { commonPasswords } from './common-passwords.js';

const minLength = 8;
const maxLength = 128;

/**
 * Judges a new password by length and by a list of those that guessers try first (NIST SP 800-63B,
 * section 5.1.1.2); composition rules are left out on purpose, as that text advises.
 *
 * @throws user.weak-password
 */
export function checkNewPassword(password: string, account: string): void {
  const fault = passwordFault(password, account);
  if (fault !== null) {
    throw new DomainError('user.weak-password', undefined, [{ field: 'password', message: fault }]);
  }
}

function passwordFault(password: string, account: string): string | null {
  const length = [...password].length;
  if (length < minLength) return `Use at least ${minLength} characters.`;
  if (length > maxLength) return `Use at most ${maxLength} characters.`;
  const plain = password.toLowerCase();
  if (plain === account.toLowerCase()) return 'The password must differ from the account.';
  if (new Set(plain).size === 1) return 'The password must not be one character over and over.';
  if (commonPasswords.has(plain)) return 'This password is among the first that guessers try.';
  return null;
}
