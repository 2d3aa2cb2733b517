import { answerBytesOf, exceptionBytes, misfitOf } from '../modbus/answer-check.js';
import { crc16 } from '../modbus/crc16.js';

const checksumBytes = 2;
/** Longest frame of the protocol. */
const mostFrameBytes = 256;
/** Room for an echo, an answer and some noise. */
const capacity = 3 * mostFrameBytes;
/** Fewer bytes than any frame has: a glitch of the line when a transmitter is switched on or off. */
const mostGlitchBytes = 3;

/** What the bytes received so far amount to; null: nothing yet, go on listening. */
export type Heard = { kind: 'answer'; frame: Buffer } | { kind: 'corrupt'; text: string } | null;

/**
 * Finds the answer to one request in what comes in on an RTU line. An answer is what has the unit, the function
 * code, the length and the checksum of one; bytes around it are noise. Frames of other units, and late answers to
 * other requests, are passed over. Knows nothing of time: silence is told to it.
 */
export class AnswerBuffer {
  /** What came in and was passed over though it is no frame of another unit; null where nothing was. */
  oddity: string | null = null;
  private readonly bytes = Buffer.alloc(capacity);
  private count = 0;
  private request: Buffer | null = null;
  private body: Buffer = Buffer.alloc(0);
  private answerBytes = 0;
  private echoLeft = 0;

  /**
   * @param request the frame that goes out
   * @param hasEcho whether the line brings back what is sent
   */
  begin(request: Buffer, hasEcho: boolean): void {
    this.request = request;
    this.body = request.subarray(0, -checksumBytes);
    this.answerBytes = answerBytesOf(this.body);
    this.echoLeft = hasEcho ? request.length : 0;
    this.count = 0;
    this.oddity = null;
  }

  /** No answer is waited for any more. */
  end(): void {
    this.request = null;
    this.count = 0;
  }

  get isWaiting(): boolean {
    return this.request !== null;
  }

  push(chunk: Buffer): Heard {
    if (!this.request) return null;
    if (this.count + chunk.length > capacity) return this.give('more bytes came in than an answer has');
    chunk.copy(this.bytes, this.count);
    this.count += chunk.length;
    if (this.echoLeft > 0) {
      const echo = this.takeEcho(this.request);
      if (echo || this.echoLeft > 0) return echo;
    }
    return this.findAnswer(this.request);
  }

  /** The line has fallen silent after some bytes: they were all. */
  silence(): Heard {
    if (!this.request || this.count === 0) return null;
    const burst = this.bytes.subarray(0, this.count);
    if (this.echoLeft > 0)
      return this.give('the echo of the request broke off: another sender was in the way');
    this.count = 0;
    const isGlitch = burst.length <= mostGlitchBytes;
    if (isGlitch) {
      this.oddity ??= `${burst.length} stray bytes came in`;
      return null;
    }
    if (crc16(burst) !== 0) return this.give(this.brokenText(burst));
    if (burst[0] === this.request[0]) {
      this.oddity = misfitOf(this.body, burst.subarray(0, -checksumBytes)) ?? 'a late answer came in';
    }
    return null;
  }

  private brokenText(burst: Buffer): string {
    const wanted = this.answerBytes + checksumBytes;
    const isShort = burst[0] === this.body[0] && burst[1] === this.body[1] && burst.length < wanted;
    return isShort
      ? `the answer broke off after ${burst.length} of ${wanted} bytes`
      : `${burst.length} bytes came in without a valid checksum`;
  }

  private takeEcho(request: Buffer): Heard {
    const length = Math.min(this.count, request.length);
    if (this.bytes.compare(request, 0, length, 0, length) !== 0) {
      return this.give('the echo differs from the request: another sender was in the way');
    }
    if (length < request.length) return null;
    this.echoLeft = 0;
    this.bytes.copyWithin(0, length, this.count);
    this.count -= length;
    return null;
  }

  private findAnswer(request: Buffer): Heard {
    for (let at = 0; at + exceptionBytes + checksumBytes <= this.count; at += 1) {
      if (this.bytes[at] !== request[0]) continue;
      const length = this.lengthAt(at, request[1] ?? 0);
      if (length === 0 || at + length > this.count || crc16(this.bytes, at, at + length) !== 0) continue;
      const frame = Buffer.from(this.bytes.subarray(at, at + length));
      return this.judge(frame, this.bytes.subarray(0, at), request);
    }
    return null;
  }

  /** Length of the answer that may begin here; 0 where none does. */
  private lengthAt(at: number, code: number): number {
    const found = this.bytes[at + 1];
    if (found === code) return this.answerBytes + checksumBytes;
    return found === (code | 0x80) ? exceptionBytes + checksumBytes : 0;
  }

  private judge(frame: Buffer, before: Buffer, request: Buffer): Heard {
    if (before.length >= request.length && before.includes(request)) {
      return this.give('the request came back before the answer: the line has an echo, set "Echo"');
    }
    const misfit = misfitOf(this.body, frame.subarray(0, -checksumBytes));
    if (misfit !== null) return this.give(misfit);
    this.end();
    return { kind: 'answer', frame };
  }

  private give(text: string): Heard {
    this.end();
    return { kind: 'corrupt', text };
  }
}
