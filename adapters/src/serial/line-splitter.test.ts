import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { LineSplitter } from './line-splitter.js';

function linesOf(splitter: LineSplitter, bytes: Buffer, cuts: readonly number[]): string[] {
  const places = [0, ...[...cuts].sort((a, b) => a - b), bytes.length];
  return places.slice(1).flatMap((end, index) => splitter.push(bytes.subarray(places[index], end)));
}

// From memory: the two sentences that most descriptions of NMEA 0183 show.
const sentences = [
  '$GPGGA,123519,4807.038,N,01131.000,E,1,08,0.9,545.4,M,46.9,M,,*47',
  '$GPRMC,123519,A,4807.038,N,01131.000,E,022.4,084.4,230394,003.1,W*6A',
];

describe('LineSplitter', () => {
  it('finds the same lines wherever two cuts are made', () => {
    const bytes = Buffer.from(`${sentences.join('\r\n')}\r\n`);
    for (let first = 0; first <= bytes.length; first += 1) {
      for (let second = first; second <= bytes.length; second += 7) {
        expect(linesOf(new LineSplitter('\r\n', 82), bytes, [first, second])).toEqual(sentences);
      }
    }
  });

  it('drops noise without end, counts it once and takes the next line whole', () => {
    const splitter = new LineSplitter('\r\n', 10);
    for (let chunk = 0; chunk < 1000; chunk += 1) expect(splitter.push(Buffer.alloc(64, 0x55))).toEqual([]);
    expect(splitter.push(Buffer.from('\r\nok\r\n'))).toEqual(['ok']);
    expect(splitter.dropped).toBe(1);
  });

  it('keeps empty lines', () => {
    expect(new LineSplitter('\n', 5).push(Buffer.from('\n\na\n'))).toEqual(['', '', 'a']);
  });

  it('drops exactly the lines that are too long, for every text and every cut', () => {
    const line = fc.string({ unit: fc.constantFrom('a', 'b', '\r'), maxLength: 12 });
    fc.assert(
      fc.property(fc.array(line), fc.array(fc.nat(200)), (texts, cuts) => {
        // A line that ends in the delimiter's first byte would move the delimiter: not what is tested here.
        const lines = texts.map((text) => text.replace(/\r+$/, ''));
        const bytes = Buffer.from(lines.map((text) => `${text}\r\n`).join(''));
        const splitter = new LineSplitter('\r\n', 6);
        const kept = lines.filter((text) => text.length <= 6);
        expect(
          linesOf(
            splitter,
            bytes,
            cuts.filter((cut) => cut <= bytes.length),
          ),
        ).toEqual(kept);
        expect(splitter.dropped).toBe(lines.length - kept.length);
      }),
    );
  });
});
