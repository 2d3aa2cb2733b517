import { expect, it } from 'vitest';
import { fuzzRtu, fuzzTcp } from './reply-fuzz.fixture.js';

const total = (count: object): number =>
  Object.values(count).reduce((sum: number, each: number) => sum + each, 0);

it('a million mutated answers over RTU', { timeout: 900_000 }, async () => {
  const count = await fuzzRtu(1_000_000, 3);
  console.log('RTU', count);
  expect(total(count)).toBe(1_000_000);
});

it('a million mutated answers over TCP', { timeout: 900_000 }, async () => {
  const count = await fuzzTcp(1_000_000, 4);
  console.log('TCP', count);
  expect(total(count)).toBe(1_000_000);
});
