import { DomainError } from '@cresthold/shared';
import { expect, it } from 'vitest';
import { asDomainError } from './known-error.js';

it('an error of the catalogue is known by its code, whatever copy of the class it is of', () => {
  const own = new DomainError('adapter.timeout', 'Late.');
  expect(asDomainError(own)).toBe(own);
  const foreign = Object.assign(new Error('Late.'), { code: 'adapter.timeout' });
  expect(asDomainError(foreign)).toMatchObject({
    code: 'adapter.timeout',
    kind: 'timeout',
    message: 'Late.',
  });
});

it.each([new Error('x'), Object.assign(new Error('x'), { code: 'ECONNREFUSED' }), 'adapter.timeout', null])(
  '%s is none',
  (thrown) => {
    expect(asDomainError(thrown)).toBeNull();
  },
);
