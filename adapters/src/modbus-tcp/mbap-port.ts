import { EventEmitter } from 'node:events';
import type { Socket } from 'node:net';
import { DomainError } from '@cresthold/shared';
import { misfitOf } from '../modbus/answer-check.js';
import { sealFrame } from '../modbus/crc16.js';
import type { ModbusPort } from '../modbus/modbus-client.js';

/** Bytes of the header before the unit number: transaction, protocol, length. */
const headerBytes = 6;
/** Unit number and PDU of the longest answer; the shortest is an exception. */
const mostBytes = 254;
const leastBytes = 3;

/** What the port needs of its socket; the real one, or any pair of functions in tests. */
export type MbapSocket = Pick<Socket, 'write' | 'on' | 'destroyed'>;

/**
 * Frames of Modbus TCP over a socket. An answer is taken only for the transaction that waits: late and double
 * ones are dropped. A header that is none means that the place in the stream is lost: the wire is broken.
 *
 * @source MODBUS Messaging on TCP/IP Implementation Guide V1.0b, 3.1.3
 */
export class MbapPort extends EventEmitter implements ModbusPort {
  private rest: Buffer = Buffer.alloc(0);
  private transaction = 0;
  private request: Buffer | null = null;
  private isBroken = false;

  constructor(
    private readonly socket: MbapSocket,
    private readonly label: string,
  ) {
    super();
    socket.on('data', (chunk: Buffer) => {
      this.take(chunk);
    });
  }

  get isOpen(): boolean {
    return !this.isBroken && !this.socket.destroyed;
  }

  open(done: (error: Error | null) => void): void {
    done(null);
  }

  close(done: () => void): void {
    this.destroy();
    done();
  }

  destroy(): void {
    this.isBroken = true;
    this.request = null;
  }

  write(frame: Buffer): void {
    this.request = frame.subarray(0, -2);
    this.transaction = (this.transaction + 1) & 0xffff;
    const message = Buffer.allocUnsafe(headerBytes + this.request.length);
    message.writeUInt16BE(this.transaction, 0);
    message.writeUInt16BE(0, 2);
    message.writeUInt16BE(this.request.length, 4);
    this.request.copy(message, headerBytes);
    this.socket.write(message);
  }

  private take(chunk: Buffer): void {
    this.rest = this.rest.length === 0 ? chunk : Buffer.concat([this.rest, chunk]);
    while (this.rest.length >= headerBytes && !this.isBroken) {
      const length = this.rest.readUInt16BE(4);
      if (this.rest.readUInt16BE(2) !== 0 || length < leastBytes || length > mostBytes) {
        this.breakOff();
        return;
      }
      const end = headerBytes + length;
      if (this.rest.length < end) return;
      const message = this.rest.subarray(0, end);
      this.rest = this.rest.subarray(end);
      this.judge(message);
    }
  }

  private judge(message: Buffer): void {
    const { request } = this;
    if (request === null || message.readUInt16BE(0) !== this.transaction) return;
    this.request = null;
    const misfit = misfitOf(request, message.subarray(headerBytes));
    if (misfit === null) this.emit('data', rtuFrameOf(message));
    else this.emit('corrupt', misfit);
  }

  private breakOff(): void {
    this.isBroken = true;
    this.rest = Buffer.alloc(0);
    const text = `${this.label}: what came in is no Modbus TCP: check host and port; the connection is given up.`;
    this.emit('broken', new DomainError('adapter.disconnected', text));
  }
}

/** The form in which the library takes every answer. */
function rtuFrameOf(message: Buffer): Buffer {
  const frame = Buffer.allocUnsafe(message.length - headerBytes + 2);
  message.copy(frame, 0, headerBytes);
  return sealFrame(frame);
}
