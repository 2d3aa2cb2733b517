import { describe, expect, it } from 'vitest';
import { crc16 } from '../modbus/crc16.js';
import { AnswerBuffer } from './answer-buffer.js';

const hex = (text: string): Buffer => Buffer.from(text.replaceAll(' ', ''), 'hex');
const request = hex('11 03 00 6B 00 03 76 87');
const good = hex('11 03 06 02 2B 00 00 00 64 C8 BA');
const accepted = { kind: 'answer', frame: good };

function begun(hasEcho = false): AnswerBuffer {
  const buffer = new AnswerBuffer();
  buffer.begin(request, hasEcho);
  return buffer;
}

it('has the checksum of the standard', () => {
  // Check value of CRC-16/MODBUS in the usual catalogues of checksums, and the worked one of the serial line guide
  // (from memory: 02 07 gives 41 12 on the wire).
  expect(crc16(Buffer.from('123456789'))).toBe(0x4b37);
  expect(crc16(hex('02 07'))).toBe(0x1241);
  // Whole frames of public protocol test suites, good answers and exceptions: each has the checksum 0.
  for (const frame of ['0A 81 02 B0 53', '11 83 02 C1 34', 'FF 83 02 A1 01', '11 03 00 6B 00 03 76 87']) {
    expect(crc16(hex(frame))).toBe(0);
  }
});

describe('an answer', () => {
  it('is found wherever it is cut, with garbage before and after', () => {
    const bytes = Buffer.concat([hex('00 11 03'), good, hex('FF')]);
    for (let cut = 1; cut < bytes.length; cut += 1) {
      const buffer = begun();
      const heard = [buffer.push(bytes.subarray(0, cut)), buffer.push(bytes.subarray(cut))];
      expect(heard.find((each) => each !== null)).toEqual(accepted);
    }
  });

  it('is found behind its echo, wherever both are cut', () => {
    const bytes = Buffer.concat([request, good]);
    for (let cut = 1; cut < bytes.length; cut += 1) {
      const buffer = begun(true);
      const heard = [buffer.push(bytes.subarray(0, cut)), buffer.push(bytes.subarray(cut))];
      expect(heard.find((each) => each !== null)).toEqual(accepted);
    }
  });

  it('is not waited for any more once it was given', () => {
    const buffer = begun();
    expect([buffer.push(good), buffer.push(good), buffer.isWaiting]).toEqual([accepted, null, false]);
  });
});

describe('silence', () => {
  it('after part of an answer means that it broke off', () => {
    for (let length = 4; length < good.length; length += 1) {
      const buffer = begun();
      expect(buffer.push(good.subarray(0, length))).toBeNull();
      expect(buffer.silence()).toMatchObject({ kind: 'corrupt', text: expect.stringContaining('broke off') });
    }
  });

  it('after stray bytes or the frame of another unit means nothing, and what is odd is remembered', () => {
    const buffer = begun();
    buffer.push(hex('12 03 06 02 2B 00 00 00 64 DC 4A'));
    expect([buffer.silence(), buffer.oddity]).toEqual([null, null]);
    buffer.push(hex('00'));
    expect([buffer.silence(), buffer.oddity]).toEqual([null, '1 stray bytes came in']);
    expect(buffer.push(good)).toEqual(accepted);
  });

  it('in the middle of an echo means that another sender was in the way', () => {
    const buffer = begun(true);
    buffer.push(request.subarray(0, 3));
    expect(buffer.silence()).toMatchObject({ kind: 'corrupt' });
  });
});

it('gives up on a line that never stops', () => {
  const buffer = begun();
  let heard = null;
  for (let turn = 0; turn < 100 && heard === null; turn += 1) heard = buffer.push(Buffer.alloc(64, 0x55));
  expect(heard).toMatchObject({ kind: 'corrupt', text: expect.stringContaining('more bytes') });
});
