import { crc16 } from './crc-16.js';

/** Unit number, function code and CRC; the longest frame. */
const leastBytes = 4;
const mostBytes = 256;

/** A frame with a good CRC. */
export interface RtuFrame {
  readonly unit: number;
  readonly pdu: Buffer;
}

/** Bytes of a request by its function code, where it alone fixes them: 1 to 6; by its byte count otherwise. */
function requestBytes(bytes: Buffer): number {
  const code = bytes[1] ?? 0;
  if (code >= 1 && code <= 6) return 8;
  if (code === 22) return 10;
  if (code === 15 || code === 16) return bytes.length > 6 ? 9 + (bytes[6] ?? 0) : Infinity;
  if (code === 23) return bytes.length > 10 ? 13 + (bytes[10] ?? 0) : Infinity;
  return Infinity;
}

/**
 * Cuts a stream of bytes into requests. A request is known to be whole by its length, so that it is answered
 * at once; the silence on the line after it decides where the length does not: unknown functions, other
 * stations' answers, noise.
 */
export class RtuFramer {
  private rest = Buffer.alloc(0);

  /** @returns the requests that these bytes complete, those with a bad CRC left out */
  take(bytes: Buffer): RtuFrame[] {
    this.rest = Buffer.concat([this.rest, bytes]);
    const frames: RtuFrame[] = [];
    for (;;) {
      const length = requestBytes(this.rest);
      if (this.rest.length < length || length > mostBytes) break;
      const frame = frameOf(this.rest.subarray(0, length));
      // No request of ours: more may belong to it, and the silence will tell.
      if (!frame) break;
      frames.push(frame);
      this.rest = this.rest.subarray(length);
    }
    if (this.rest.length > 4 * mostBytes) this.rest = Buffer.alloc(0);
    return frames;
  }

  /** The line was silent for 3.5 characters: what lies here is one frame, or noise. */
  silence(): RtuFrame | null {
    const frame = frameOf(this.rest);
    this.rest = Buffer.alloc(0);
    return frame;
  }
}

function frameOf(bytes: Buffer): RtuFrame | null {
  if (bytes.length < leastBytes || bytes.length > mostBytes) return null;
  const body = bytes.subarray(0, -2);
  if (crc16(body) !== bytes.readUInt16LE(bytes.length - 2)) return null;
  return { unit: body[0] ?? 0, pdu: Buffer.from(body.subarray(1)) };
}

/** A frame as it goes on the line. */
export function rtuFrame(unit: number, pdu: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from([unit]), pdu]);
  const crc = crc16(body);
  return Buffer.concat([body, Buffer.from([crc & 0xff, crc >> 8])]);
}
