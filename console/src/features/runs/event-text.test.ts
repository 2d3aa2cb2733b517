import { describe, expect, it } from 'vitest';
import { eventText } from './event-text.js';

describe('scans that came late, in words', () => {
  const type = 'scan.overran' as const;

  it.each([
    [{ latenessMs: 61.37, consecutive: 1, count: 1 }, 'A scan was 61 ms late'],
    [{ latenessMs: 61.37, consecutive: 2, count: 1 }, 'A scan was 61 ms late (2 in a row)'],
    [{ latenessMs: 80, consecutive: 1, count: 3 }, '3 scans were up to 80 ms late'],
    [{ latenessMs: 80, consecutive: 4, count: 9 }, '9 scans were up to 80 ms late (4 in a row)'],
    [{ latenessMs: 80, consecutive: 1 }, 'A scan was 80 ms late'],
  ])('says %o as "%s"', (body, text) => {
    expect(eventText({ type, ...body })).toBe(text);
  });
});
