import type { RegisterMap } from '../../modbus/testing/register-map.js';

/** Checksum bit by bit, as the serial line guide writes it down (MODBUS over Serial Line V1.02, 6.2.2). */
export function checksumBitwise(bytes: Uint8Array): number {
  let crc = 0xffff;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit += 1) crc = crc & 1 ? (crc >>> 1) ^ 0xa001 : crc >>> 1;
  }
  return crc;
}

export function withChecksum(body: readonly number[]): Buffer {
  const crc = checksumBitwise(Buffer.from(body));
  return Buffer.from([...body, crc & 0xff, crc >>> 8]);
}

type Answer = number[] | 'no such address';

function readWords(map: ReadonlyMap<number, number>, start: number, count: number): Answer {
  const words = Array.from({ length: count }, (_, index) => map.get(start + index));
  if (words.includes(undefined)) return 'no such address';
  return [2 * count, ...words.flatMap((word = 0) => [word >>> 8, word & 0xff])];
}

function readBits(map: ReadonlyMap<number, boolean>, start: number, count: number): Answer {
  const bits = Array.from({ length: count }, (_, index) => map.get(start + index));
  if (bits.includes(undefined)) return 'no such address';
  const bytes = new Array<number>(Math.ceil(count / 8)).fill(0);
  bits.forEach((bit, at) => (bytes[at >> 3]! |= Number(bit) << (at & 7)));
  return [bytes.length, ...bytes];
}

function write(map: RegisterMap, frame: Buffer): Answer {
  const start = frame.readUInt16BE(2);
  const echo = [...frame.subarray(2, 6)];
  switch (frame[1]) {
    case 5:
      if (!map.coils.has(start)) return 'no such address';
      map.coils.set(start, frame.readUInt16BE(4) === 0xff00);
      return echo;
    case 6:
      if (!map.holding.has(start)) return 'no such address';
      map.holding.set(start, frame.readUInt16BE(4));
      return echo;
    case 16: {
      const count = frame.readUInt16BE(4);
      if (readWords(map.holding, start, count) === 'no such address') return 'no such address';
      for (let at = 0; at < count; at += 1) map.holding.set(start + at, frame.readUInt16BE(7 + 2 * at));
      return echo;
    }
    case 22: {
      const held = map.holding.get(start);
      if (held === undefined) return 'no such address';
      const [and, or] = [frame.readUInt16BE(4), frame.readUInt16BE(6)];
      map.holding.set(start, (held & and) | (or & ~and & 0xffff));
      return [...frame.subarray(2, 8)];
    }
    default:
      throw new Error(`no function code ${frame[1]} here`);
  }
}

/** What a device that holds the map answers to a frame: function codes 01 to 06, 16 and 22. */
export function answerFrame(map: RegisterMap, frame: Buffer): Buffer {
  const [unit = 0, code = 0] = frame;
  const [start, count] = [frame.readUInt16BE(2), frame.readUInt16BE(4)];
  const read: Record<number, () => Answer> = {
    1: () => readBits(map.coils, start, count),
    2: () => readBits(map.discreteInputs, start, count),
    3: () => readWords(map.holding, start, count),
    4: () => readWords(map.input, start, count),
  };
  const answer = read[code]?.() ?? write(map, frame);
  return withChecksum(answer === 'no such address' ? [unit, code | 0x80, 2] : [unit, code, ...answer]);
}
