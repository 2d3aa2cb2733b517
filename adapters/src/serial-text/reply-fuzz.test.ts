import { describe, expect, it } from 'vitest';
import { crcByDivision, fuzzBursts, fuzzReplies } from './reply-fuzz.fixture.js';

describe('mutated replies', () => {
  it('end in a value or a fault, 20 000 of them, and in no value that its checksum denies', () => {
    // Recomputed from MODBUS frames in print: "123456789" has 4B37.
    expect(crcByDivision('123456789')).toBe(0x4b37);
    const { accepted, refused, incomplete } = fuzzReplies(20_000, 1);
    // Each way out is taken, so that none of the checks is empty.
    expect(Math.min(accepted, refused, incomplete)).toBeGreaterThan(100);
  });

  it('with a burst of up to 16 wrong bits are never another value where there is a CRC-16', () => {
    expect(fuzzBursts(20_000, 2)).toBe(20_000);
  });
});
