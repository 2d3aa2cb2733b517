import { expect, it } from 'vitest';
import { fuzzRtu, fuzzTcp } from './reply-fuzz.fixture.js';

const total = (count: object): number =>
  Object.values(count).reduce((sum: number, each: number) => sum + each, 0);

// The long suite sends a million into each.
it(
  '20 000 mutated answers over RTU end in a value that the checksum vouches for, or in a typed fault',
  { timeout: 60_000 },
  async () => {
    const count = await fuzzRtu(20_000, 1);
    expect(total(count)).toBe(20_000);
    // Each way to end is met, or the fuzz would prove little.
    expect(Math.min(count.accepted, count.refused, count.corrupt, count.silent)).toBeGreaterThan(50);
  },
);

it(
  '20 000 mutated answers over TCP end in a payload of the length asked for, or in a typed fault',
  { timeout: 60_000 },
  async () => {
    const count = await fuzzTcp(20_000, 2);
    expect(total(count)).toBe(20_000);
    expect(Math.min(...Object.values<number>({ ...count }))).toBeGreaterThan(50);
  },
);
