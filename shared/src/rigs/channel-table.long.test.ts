import { expect, it } from 'vitest';
import { checkRoundTrip } from './channel-table.fixture.js';

it('gives back every channel of 10 000 tables that are written and read again', () => {
  expect(() => checkRoundTrip(10_000)).not.toThrow();
}, 300_000);
