import { expect, it } from 'vitest';
import { parseMove } from './parse-move.js';

const limit = { min: -5, max: 20 };

it('takes numbers inside the limits, their ends included, with point or comma', () => {
  expect(parseMove('20', limit, '%')).toEqual({ isOk: true, value: 20 });
  expect(parseMove(' -5 ', limit, '%')).toEqual({ isOk: true, value: -5 });
  expect(parseMove('1,5', limit, '%')).toEqual({ isOk: true, value: 1.5 });
});

it('says the limits with their unit where a number is outside', () => {
  expect(parseMove('20.01', limit, '%')).toEqual({ isOk: false, message: 'Stay within \u22125 to 20 %.' });
});

it.each(['', ' ', 'abc', '1e999', '1 2'])('asks for a number where "%s" is none', (text) => {
  expect(parseMove(text, limit, '%')).toEqual({ isOk: false, message: 'Enter a number.' });
});
