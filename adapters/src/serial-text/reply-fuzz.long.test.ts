import { expect, it } from 'vitest';
import { fuzzBursts, fuzzReplies } from './reply-fuzz.fixture.js';

it('a million mutated replies end in a value or a fault, and in no value that its checksum denies', () => {
  const { accepted, refused, incomplete } = fuzzReplies(1_000_000, 77);
  console.log(`accepted ${accepted}, refused ${refused}, incomplete ${incomplete}`);
  expect(Math.min(accepted, refused, incomplete)).toBeGreaterThan(1000);
}, 600_000);

it('a million bursts of up to 16 wrong bits are never another value where there is a CRC-16', () => {
  expect(fuzzBursts(1_000_000, 78)).toBe(1_000_000);
}, 600_000);
