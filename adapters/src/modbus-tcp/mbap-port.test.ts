import { EventEmitter } from 'node:events';
import { describe, expect, it } from 'vitest';
import { sealFrame } from '../modbus/crc16.js';
import { MbapPort } from './mbap-port.js';

const hex = (text: string): Buffer => Buffer.from(text.replaceAll(' ', ''), 'hex');

class FakeSocket extends EventEmitter {
  destroyed = false;
  sent: Buffer = Buffer.alloc(0);
  write(bytes: Buffer): boolean {
    this.sent = bytes;
    return true;
  }
}

const request = sealFrame(hex('11 03 00 7C 00 02 00 00'));

/** A port whose last request was that of the given transaction, and what it made of what came in. */
function portAt(transaction: number) {
  const socket = new FakeSocket();
  const port = new MbapPort(socket as never, 'device');
  const heard: string[] = [];
  port.on('data', (frame: Buffer) => heard.push(frame.toString('hex').toUpperCase()));
  port.on('corrupt', (text: string) => heard.push(text));
  port.on('broken', (error: Error) => heard.push(error.message));
  for (let turn = 0; turn < transaction; turn += 1) port.write(request);
  return { socket, heard };
}

// Whole messages with their header, as they stand in the framer test of a public Modbus library.
describe('the messages of transaction 0C05', () => {
  it('ask and answer byte for byte', () => {
    const { socket, heard } = portAt(0x0c05);
    expect(socket.sent).toEqual(hex('0C 05 00 00 00 06 11 03 00 7C 00 02'));
    socket.emit('data', hex('0C 05 00 00 00 07 11 03 04 00 8D 00 8E'));
    expect(heard).toEqual(['110304008D008EFBBD']);
  });

  it('answer with an exception', () => {
    const { socket, heard } = portAt(0x0c05);
    socket.emit('data', hex('0C 05 00 00 00 03 11 83 02'));
    expect(heard).toEqual(['118302C134']);
  });

  it('are found wherever they are cut, behind those of other transactions', () => {
    const bytes = hex('0C 04 00 00 00 03 11 83 02 0C 05 00 00 00 07 11 03 04 00 8D 00 8E');
    for (let cut = 1; cut < bytes.length; cut += 1) {
      const { socket, heard } = portAt(0x0c05);
      socket.emit('data', bytes.subarray(0, cut));
      socket.emit('data', bytes.subarray(cut));
      expect(heard).toEqual(['110304008D008EFBBD']);
    }
  });
});

it('numbers its transactions round, past 65535', () => {
  const { socket } = portAt(0x10001);
  expect(socket.sent.readUInt16BE(0)).toBe(1);
});
