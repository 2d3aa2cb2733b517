import type { ModbusDevice } from './modbus-device.js';
import { ModbusException } from './modbus-exception.js';
import type { RegisterTable } from './register-map.types.js';

/** Most that one request may carry; Modbus application protocol, V1.1b3, section 6. */
const most = { readBits: 2000, readWords: 125, writeBits: 1968, writeWords: 123, readWriteWords: 121 };

type Answer = (pdu: Buffer, device: ModbusDevice) => Buffer;

const tables: Readonly<Record<number, RegisterTable>> = {
  1: 'coil',
  2: 'discrete-input',
  3: 'holding-register',
  4: 'input-register',
};

const answers: Readonly<Record<number, Answer>> = {
  1: readBits,
  2: readBits,
  3: readWords,
  4: readWords,
  5: writeCoil,
  6: writeWord,
  15: writeCoils,
  16: writeWords,
  22: maskWrite,
  23: readWriteWords,
};

/**
 * Answers one request as the Modbus application protocol, V1.1b3, has it: function codes 1 to 6, 15, 16, 22, 23.
 *
 * @param pdu function code and data
 * @returns the answer, or the exception
 */
export function answerPdu(pdu: Buffer, device: ModbusDevice): Buffer {
  const code = pdu[0] ?? 0;
  try {
    const answer = answers[code];
    if (!answer) throw new ModbusException('function');
    return answer(pdu, device);
  } catch (error) {
    if (error instanceof ModbusException) return exceptionPdu(code, error);
    // Shorter than its function needs.
    if (error instanceof RangeError) return exceptionPdu(code, new ModbusException('value'));
    throw error;
  }
}

/** Code of the request with its high bit set, and the exception. */
export function exceptionPdu(functionCode: number, exception: ModbusException): Buffer {
  return Buffer.from([functionCode | 0x80, exception.code]);
}

function readBits(pdu: Buffer, device: ModbusDevice): Buffer {
  const count = checked(pdu.readUInt16BE(3), most.readBits);
  const bits = device.read(tables[pdu[0] ?? 0] ?? 'coil', pdu.readUInt16BE(1), count);
  const bytes = Buffer.alloc(Math.ceil(count / 8));
  bits.forEach((bit, index) => {
    if (bit) bytes[index >> 3] = (bytes[index >> 3] ?? 0) | (1 << (index & 7));
  });
  return Buffer.concat([Buffer.from([pdu[0] ?? 0, bytes.length]), bytes]);
}

function readWords(pdu: Buffer, device: ModbusDevice): Buffer {
  const count = checked(pdu.readUInt16BE(3), most.readWords);
  const table = tables[pdu[0] ?? 0] ?? 'holding-register';
  return wordsAnswer(pdu[0] ?? 0, device.read(table, pdu.readUInt16BE(1), count));
}

function writeCoil(pdu: Buffer, device: ModbusDevice): Buffer {
  const word = pdu.readUInt16BE(3);
  if (word !== 0 && word !== 0xff00) throw new ModbusException('value');
  device.write('coil', pdu.readUInt16BE(1), [word === 0 ? 0 : 1]);
  return pdu.subarray(0, 5);
}

function writeWord(pdu: Buffer, device: ModbusDevice): Buffer {
  device.write('holding-register', pdu.readUInt16BE(1), [pdu.readUInt16BE(3)]);
  return pdu.subarray(0, 5);
}

function writeCoils(pdu: Buffer, device: ModbusDevice): Buffer {
  const count = checked(pdu.readUInt16BE(3), most.writeBits);
  if (pdu.readUInt8(5) !== Math.ceil(count / 8)) throw new ModbusException('value');
  const bits = Array.from({ length: count }, (_, i) => (pdu.readUInt8(6 + (i >> 3)) >> (i & 7)) & 1);
  device.write('coil', pdu.readUInt16BE(1), bits);
  return pdu.subarray(0, 5);
}

function writeWords(pdu: Buffer, device: ModbusDevice): Buffer {
  const count = checked(pdu.readUInt16BE(3), most.writeWords);
  device.write('holding-register', pdu.readUInt16BE(1), wordsAt(pdu, 5, count));
  return pdu.subarray(0, 5);
}

function maskWrite(pdu: Buffer, device: ModbusDevice): Buffer {
  const address = pdu.readUInt16BE(1);
  const [and, or] = [pdu.readUInt16BE(3), pdu.readUInt16BE(5)];
  const [word = 0] = device.read('holding-register', address, 1);
  device.write('holding-register', address, [((word & and) | (or & ~and)) & 0xffff]);
  return pdu.subarray(0, 7);
}

function readWriteWords(pdu: Buffer, device: ModbusDevice): Buffer {
  const readCount = checked(pdu.readUInt16BE(3), most.readWords);
  const writeCount = checked(pdu.readUInt16BE(7), most.readWriteWords);
  const words = wordsAt(pdu, 9, writeCount);
  // What cannot be read is refused before anything is written.
  device.read('holding-register', pdu.readUInt16BE(1), readCount);
  device.write('holding-register', pdu.readUInt16BE(5), words);
  return wordsAnswer(23, device.read('holding-register', pdu.readUInt16BE(1), readCount));
}

function checked(count: number, max: number): number {
  if (count < 1 || count > max) throw new ModbusException('value');
  return count;
}

/** @param at where the byte count stands */
function wordsAt(pdu: Buffer, at: number, count: number): number[] {
  if (pdu.readUInt8(at) !== 2 * count) throw new ModbusException('value');
  return Array.from({ length: count }, (_, index) => pdu.readUInt16BE(at + 1 + 2 * index));
}

function wordsAnswer(code: number, words: readonly number[]): Buffer {
  const answer = Buffer.alloc(2 + 2 * words.length);
  answer[0] = code;
  answer[1] = 2 * words.length;
  words.forEach((word, index) => answer.writeUInt16BE(word, 2 + 2 * index));
  return answer;
}
