import { expect, it } from 'vitest';
import { meetsRange } from './semver-range.js';

// The caret table of the npm documentation of semver ranges ("Caret Ranges").
it.each([
  ['1.2.3', '^1.2.3', true],
  ['1.9.0', '^1.2.3', true],
  ['1.2.2', '^1.2.3', false],
  ['2.0.0', '^1.2.3', false],
  ['0.2.4', '^0.2.3', true],
  ['0.3.0', '^0.2.3', false],
  ['0.0.3', '^0.0.3', true],
  ['0.0.4', '^0.0.3', false],
  ['10.0.0', '^9.0.0', false],
  ['1.10.0', '^1.9.0', true],
  ['0.0.0', '^0.0.0', true],
  ['1.0.0', '1.0.0', true],
  ['1.0.1', '1.0.0', false],
  ['1.0.0', '>=1', false],
  ['1.0', '^1.0.0', false],
])('%s meets %s: %s', (version, range, does) => {
  expect(meetsRange(version, range)).toBe(does);
});
