import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type Expectation, type Frame, FrameReader } from './frame-reader.js';

const line: Expectation = { kind: 'line' };

function framesOf(reader: FrameReader, bytes: Buffer, cuts: readonly number[], expectation = line): Frame[] {
  const places = [0, ...[...cuts].sort((a, b) => a - b), bytes.length];
  return places.slice(1).flatMap((end, index) => {
    reader.push(bytes.subarray(places[index], end));
    const frames: Frame[] = [];
    for (let frame = reader.next(expectation); frame; frame = reader.next(expectation)) frames.push(frame);
    return frames;
  });
}

const linesOf = (frames: readonly Frame[]): string[] =>
  frames.flatMap((frame) => (frame.kind === 'line' ? [frame.text] : []));

// From memory: the two sentences that most descriptions of NMEA 0183 show.
const sentences = [
  '$GPGGA,123519,4807.038,N,01131.000,E,1,08,0.9,545.4,M,46.9,M,,*47',
  '$GPRMC,123519,A,4807.038,N,01131.000,E,022.4,084.4,230394,003.1,W*6A',
];

describe('lines', () => {
  it('are the same wherever two cuts are made', () => {
    const bytes = Buffer.from(`${sentences.join('\r\n')}\r\n`);
    for (let first = 0; first <= bytes.length; first += 1) {
      for (let second = first; second <= bytes.length; second += 7) {
        expect(linesOf(framesOf(new FrameReader('\r\n', 82), bytes, [first, second]))).toEqual(sentences);
      }
    }
  });

  it('lose noise without end once, and the next one comes whole', () => {
    const reader = new FrameReader('\r\n', 10);
    const noise = Array.from({ length: 1000 }, () => framesOf(reader, Buffer.alloc(64, 0x55), []));
    expect(noise.flat().map(({ kind }) => kind)).toEqual(['noise']);
    expect(reader.pendingChars).toBeLessThan(20);
    expect(linesOf(framesOf(reader, Buffer.from('\r\nok\r\n'), []))).toEqual(['ok']);
  });

  it('are not empty, and lose blanks at their ends', () => {
    expect(linesOf(framesOf(new FrameReader('\n', 50), Buffer.from('\n\r\n\ra \r\n b\n'), []))).toEqual([
      'a',
      ' b',
    ]);
  });

  it('that are too long are the only ones lost, for every text and every cut', () => {
    const text = fc.string({ unit: fc.constantFrom('a', 'b'), minLength: 1, maxLength: 12 });
    fc.assert(
      fc.property(fc.array(text), fc.array(fc.nat(200)), (texts, cuts) => {
        const bytes = Buffer.from(texts.map((each) => `${each}\r\n`).join(''));
        const fitting = cuts.filter((cut) => cut <= bytes.length);
        const frames = framesOf(new FrameReader('\r\n', 6), bytes, fitting);
        expect(linesOf(frames)).toEqual(texts.filter((each) => each.length <= 6));
        expect(frames.filter(({ kind }) => kind === 'noise')).toHaveLength(
          texts.filter((each) => each.length > 6).length,
        );
      }),
    );
  });
});

describe('blocks', () => {
  const block: Expectation = { kind: 'block', prefix: 'CURV ' };
  /** Bytes that hold terminators and hashes, so that nothing but the length tells where it ends. */
  const payload = Buffer.from('\n\r\n#15\r\n\x00\xff\n', 'latin1');
  const whole = Buffer.concat([Buffer.from('CURV #211'), payload, Buffer.from('\n')]);

  it('come whole wherever two cuts are made, and what follows too', () => {
    const bytes = Buffer.concat([whole, Buffer.from('\r\n'), whole]);
    for (let first = 0; first <= bytes.length; first += 1) {
      for (let second = first; second <= bytes.length; second += 3) {
        const frames = framesOf(new FrameReader('\n', 100), bytes, [first, second], block);
        expect(frames).toEqual([
          { kind: 'block', bytes: payload },
          { kind: 'block', bytes: payload },
        ]);
      }
    }
  });

  it('end in CR LF as well where LF is asked for', () => {
    const bytes = Buffer.from('CURV #13abc\r\nx');
    expect(framesOf(new FrameReader('\n', 100), bytes, [], block)).toHaveLength(1);
  });

  it.each([
    ['a line in their place', 'ERR 5\n', 'line'],
    ['an indefinite length', 'CURV #0abc\n', 'line'],
    ['no digits', 'CURV #2x1\n', 'line'],
    ['a length beyond the most', 'CURV #3999', 'noise'],
    ['a length that is too short', 'CURV #12abc\n', 'noise'],
  ])('with %s are no blocks', (_name, text, kind) => {
    const frames = framesOf(new FrameReader('\n', 100), Buffer.from(text), [], block);
    expect(frames.map((frame) => frame.kind)).toEqual([kind]);
  });
});

describe('the echo of a command', () => {
  it('is taken wherever it is cut, with what the line before left', () => {
    const reader = new FrameReader('\r\n', 100);
    for (const character of '\r\nMEAS') {
      expect(reader.takeEcho('MEAS?')).toBe('more');
      reader.push(Buffer.from(character));
    }
    reader.push(Buffer.from('?\r5\r\n'));
    expect(reader.takeEcho('MEAS?')).toBe('taken');
    expect(reader.next(line)).toEqual({ kind: 'line', text: '5' });
    reader.push(Buffer.from('MEASx'));
    expect(reader.takeEcho('MEAS?')).toBe('other');
  });
});
