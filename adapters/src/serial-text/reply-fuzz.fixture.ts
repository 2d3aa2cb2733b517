import assert from 'node:assert/strict';
import type { ChecksumKind } from './checksum.js';
import { type Expectation, FrameReader } from './frame-reader.js';
import { LineCodec } from './line-codec.js';
import { listOfReply, samplesOfBlock, valueOfReply } from './reply-value.js';
import { type SerialTextAddressInput, serialTextAddressSchema } from './serial-text-address.schema.js';

/** A repeatable source of whole numbers from 0 to below `below` (Park & Miller 1988). */
export function seededNumbers(seed: number): (below: number) => number {
  let state = seed;
  return (below) => {
    state = (state * 48_271) % 2_147_483_647;
    return state % below;
  };
}

interface Subject {
  title: string;
  bytes: Buffer;
  checksum: ChecksumKind;
  address: SerialTextAddressInput;
  /** The value of the reply as it is; null for a trace. */
  value: number | null;
}

const block = Buffer.concat([Buffer.from('#3256'), Buffer.alloc(256, '\n#1'), Buffer.from('\r\n')]);

/** Whole replies; their checksums are in print or were made by the independent code below. */
export const subjects: readonly Subject[] = [
  {
    title: 'sentence',
    bytes: Buffer.from('$GPGGA,123519,4807.038,N,01131.000,E,1,08,0.9,545.4,M,46.9,M,,*47\r\n'),
    checksum: 'nmea-xor',
    address: { query: 'Q?', field: 9 },
    value: 545.4,
  },
  {
    title: 'line with a CRC',
    bytes: lineWithCrc('+1.23456E+01,RDY'),
    checksum: 'crc-16-modbus',
    address: { query: 'Q?' },
    value: 12.3456,
  },
  {
    title: 'plain line',
    bytes: Buffer.from('VOLT +1.2500E+00 V\r\n'),
    checksum: 'none',
    address: { query: 'Q?', prefix: 'VOLT ', suffix: ' V' },
    value: 1.25,
  },
  {
    title: 'list',
    bytes: Buffer.from(`${Array.from({ length: 64 }, (_, point) => point / 8).join(',')}\r\n`),
    checksum: 'none',
    address: { query: 'Q?', shape: 'list', points: 64 },
    value: null,
  },
  {
    title: 'block',
    bytes: block,
    checksum: 'none',
    address: { query: 'Q?', shape: 'block', points: 64 },
    value: null,
  },
];

/** Remainder by long division of the bits, low bit of each byte first: another way than the code under test. */
export function crcByDivision(text: string): number {
  const bits = [...text].flatMap((character) => bitsOf(character.charCodeAt(0), 8));
  const register = bitsOf(0xffff, 16);
  for (const bit of bits) {
    const out = (register.shift() ?? 0) ^ bit;
    register.push(0);
    if (out === 1)
      bitsOf(0xa001, 16).forEach((tap, index) => (register[index] = (register[index] ?? 0) ^ tap));
  }
  return register.reduce((value, bit, index) => value + bit * 2 ** index, 0);
}

function bitsOf(value: number, count: number): number[] {
  return Array.from({ length: count }, (_, index) => (value >> index) & 1);
}

function lineWithCrc(text: string): Buffer {
  return Buffer.from(`${text}${crcByDivision(text).toString(16).toUpperCase().padStart(4, '0')}\r\n`);
}

/** Whether the checksum on a line says that the line is right, worked out past the code under test. */
function checksumAgrees(line: string, kind: ChecksumKind): boolean {
  if (kind === 'crc-16-modbus') {
    return (
      /^[0-9a-f]{4}$/i.test(line.slice(-4)) &&
      parseInt(line.slice(-4), 16) === crcByDivision(line.slice(0, -4))
    );
  }
  const found = /[$!]([^$!]*)\*([0-9a-f]{2})$/i.exec(line);
  const sum = [...(found?.[1] ?? '')].reduce((value, character) => value ^ character.charCodeAt(0), 0);
  return found !== null && sum === parseInt(found[2] ?? '', 16);
}

/** What a noisy line, a broken device or a lost byte makes of a reply. */
function mutated(bytes: Buffer, other: Buffer, random: (below: number) => number): Buffer {
  const at = random(bytes.length);
  const [head, tail] = [bytes.subarray(0, at), bytes.subarray(at)];
  switch (random(6)) {
    case 0: {
      const flipped = Buffer.from(bytes);
      flipped[at] = (flipped[at] ?? 0) ^ (1 << random(8));
      return flipped;
    }
    case 1:
      return Buffer.concat([head, tail.subarray(1 + random(4))]);
    case 2:
      return Buffer.concat([head, Buffer.from([random(256)]), tail]);
    case 3:
      return Buffer.concat([head, other.subarray(random(other.length))]);
    case 4:
      return Buffer.concat([head, head.subarray(random(at + 1)), tail]);
    default: {
      const noisy = Buffer.from(bytes);
      for (let index = at; index < Math.min(noisy.length, at + 6); index += 1) noisy[index] = random(256);
      return noisy;
    }
  }
}

export interface FuzzCount {
  accepted: number;
  refused: number;
  incomplete: number;
}

/**
 * Feeds mutated replies, in random chunks, through reader, codec and value, and fails where anything throws, a
 * value is no number, or a value is accepted whose checksum says otherwise.
 */
export function fuzzReplies(cases: number, seed: number): FuzzCount {
  const random = seededNumbers(seed);
  const count: FuzzCount = { accepted: 0, refused: 0, incomplete: 0 };
  const prepared = subjects.map((subject) => prepare(subject));
  for (let index = 0; index < cases; index += 1) {
    const subject = prepared[random(prepared.length)] ?? assert.fail();
    const other = prepared[random(prepared.length)] ?? subject;
    let bytes = mutated(subject.bytes, other.bytes, random);
    if (random(3) === 0 && bytes.length > 0) bytes = mutated(bytes, other.bytes, random);
    runCase(subject, bytes, random, count);
  }
  return count;
}

type Prepared = ReturnType<typeof prepare>;

function prepare({ bytes, checksum, address, value }: Subject) {
  const parsed = serialTextAddressSchema.parse(address);
  const codec = new LineCodec({
    characters: 'ascii',
    checksum,
    checksumOn: 'both',
    checksumSeparator: '',
    checksumSkips: 0,
    requestTerminator: '\\n',
  });
  const expectation: Expectation =
    parsed.shape === 'block' ? { kind: 'block', prefix: '' } : { kind: 'line' };
  return {
    bytes,
    checksum,
    address: parsed,
    value,
    codec,
    expectation,
    trace: new Float64Array(parsed.points),
  };
}

function runCase(
  subject: Prepared,
  bytes: Buffer,
  random: (below: number) => number,
  count: FuzzCount,
): void {
  const reader = new FrameReader('\r\n', 1000);
  const cut = random(bytes.length + 1);
  let frames = 0;
  for (const chunk of [bytes.subarray(0, cut), bytes.subarray(cut)]) {
    reader.push(chunk);
    for (let frame = reader.next(subject.expectation); frame; frame = reader.next(subject.expectation)) {
      frames += 1;
      assert.ok(frames <= bytes.length, 'more frames than bytes');
      if (frame.kind === 'noise') count.refused += 1;
      else judge(subject, frame.kind === 'line' ? frame.text : frame.bytes, count);
    }
  }
  assert.ok(reader.pendingChars <= 1300);
  if (frames === 0) count.incomplete += 1;
}

function judge(subject: Prepared, content: string | Buffer, count: FuzzCount): void {
  const outcome = outcomeOf(subject, content);
  if (typeof outcome !== 'number') {
    assert.equal(typeof outcome.fault, 'string');
    count.refused += 1;
    return;
  }
  count.accepted += 1;
  if (subject.checksum === 'none' || typeof content !== 'string') return;
  assert.ok(checksumAgrees(content, subject.checksum), `accepted against its checksum: ${content}`);
}

function outcomeOf(subject: Prepared, content: string | Buffer): number | { fault: string } {
  const { address, trace, codec } = subject;
  if (typeof content !== 'string') return samplesOfBlock(content, address, trace) ?? 0;
  const text = codec.decode(content);
  if (typeof text !== 'string') return text;
  if (address.shape === 'value') return valueOfReply(text, address);
  return listOfReply(text, address, trace) ?? 0;
}

/**
 * Bursts of up to 16 wrong bits in the text that a CRC-16 covers: every one is found (Peterson & Brown 1961), so that a value
 * is accepted only where it is the right one.
 */
export function fuzzBursts(cases: number, seed: number): number {
  const random = seededNumbers(seed);
  const subject = prepare(subjects.find(({ checksum }) => checksum === 'crc-16-modbus') ?? assert.fail());
  const length = subject.bytes.length - 2;
  const covered = length - 4;
  let tried = 0;
  for (let index = 0; index < cases; index += 1) {
    const line = Buffer.from(subject.bytes.subarray(0, length));
    const first = random(covered * 8 - 16);
    for (let bit = first; bit < first + 16; bit += 1) {
      if (bit === first || random(2) === 1) line[bit >> 3] = (line[bit >> 3] ?? 0) ^ (1 << (bit & 7));
    }
    tried += 1;
    const outcome = outcomeOf(subject, line.toString('latin1'));
    if (typeof outcome === 'number') assert.equal(outcome, subject.value, line.toString('latin1'));
  }
  return tried;
}
