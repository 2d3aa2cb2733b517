import { EventEmitter } from 'node:events';
import type { ModbusPort } from '../modbus/modbus-client.js';
import type { OpenSerialPort } from '../serial/open-serial-port.js';
import { portFault } from '../serial/open-serial-port.js';
import { AnswerBuffer, type Heard } from './answer-buffer.js';
import type { SilentIntervals } from './rtu-timing.js';
import { waitUntil } from './wait-until.js';

/** What the port needs of its serial port; the real one, or a pair of functions in tests. */
export type RtuSerial = Pick<OpenSerialPort, 'write' | 'isOpen'> & {
  on(event: 'data', listener: (chunk: Buffer) => void): unknown;
};

export interface RtuPortOptions extends SilentIntervals {
  path: string;
  /** Time of one character on the wire. */
  characterMs: number;
  /** Whether the line brings back what is sent. */
  hasEcho: boolean;
  /** Least time between the end of an answer and the next request, beside the silent interval. */
  turnaroundMs: number;
  /** A monotonic clock. */
  nowMs: () => number;
}

/**
 * The bytes of one frame reach a program in pieces, since adapters and drivers gather them for up to 16 ms: only a
 * silence that is longer by twice this much than the protocol allows within a frame means that no more will come.
 * Twice: where this process was held up, a timer is served before the bytes that came in meanwhile.
 */
const gatheringMs = 15;

/** Least silence, after an answer that stayed away, before the next request: what comes in meanwhile is dropped. */
const drainMs = 40;

/**
 * Frames of Modbus RTU over a serial port, for the library's client.
 *
 * @source MODBUS over Serial Line V1.02, 2.5.1
 */
export class RtuPort extends EventEmitter implements ModbusPort {
  private readonly answer = new AnswerBuffer();
  /** Runs where bytes came in that are no whole answer yet. */
  private brokenOff: NodeJS.Timeout | null = null;
  /** When the last byte came in, or the last one went out. */
  private lastByteMs: number;
  /** Whether the last request may still be answered: late, or by the rest of a broken answer. */
  private isSuspect = false;
  private isDestroyed = false;

  constructor(
    private readonly serial: RtuSerial,
    private readonly options: RtuPortOptions,
  ) {
    super();
    this.lastByteMs = options.nowMs();
    serial.on('data', (chunk) => {
      this.take(chunk);
    });
  }

  get isOpen(): boolean {
    return this.serial.isOpen && !this.isDestroyed;
  }

  open(done: (error: Error | null) => void): void {
    done(null);
  }

  close(done: () => void): void {
    this.destroy();
    done();
  }

  destroy(): void {
    this.isDestroyed = true;
    this.answer.end();
    this.stopTimer();
  }

  write(frame: Buffer): void {
    this.answer.begin(frame, this.options.hasEcho);
    this.isSuspect = true;
    this.lastByteMs = this.options.nowMs() + frame.length * this.options.characterMs;
    this.serial.write(frame, (error) => {
      if (error) this.emit('broken', portFault(this.options.path, error));
    });
  }

  /** What came in since the request that is no answer; see {@link AnswerBuffer.oddity}. */
  heard(): string | null {
    return this.answer.oddity;
  }

  /**
   * Waits for the silence that must come before a request. What comes in meanwhile belongs to an earlier one and
   * is dropped.
   *
   * @returns null where the line is silent; a promise of whether it fell silent, `mostMs` later than it must at the latest
   */
  quiet(mostMs: number): Promise<boolean> | null {
    const { t35Ms, turnaroundMs, nowMs } = this.options;
    const startMs = nowMs();
    if (this.answer.isWaiting) this.lastByteMs = Math.max(this.lastByteMs, startMs);
    this.answer.end();
    const silentMs = turnaroundMs + (this.isSuspect ? Math.max(drainMs, t35Ms) : t35Ms);
    return startMs >= this.lastByteMs + silentMs
      ? null
      : this.waitForSilence(silentMs, startMs + silentMs + mostMs);
  }

  private async waitForSilence(silentMs: number, deadlineMs: number): Promise<boolean> {
    for (;;) {
      const nowMs = this.options.nowMs();
      const silentAtMs = this.lastByteMs + silentMs;
      if (nowMs >= silentAtMs || this.isDestroyed) return true;
      if (silentAtMs > deadlineMs) return false;
      await waitUntil(silentAtMs, this.options.nowMs);
    }
  }

  private take(chunk: Buffer): void {
    this.lastByteMs = Math.max(this.lastByteMs, this.options.nowMs());
    if (!this.answer.isWaiting) return;
    this.tell(this.answer.push(chunk));
    if (this.answer.isWaiting) this.startTimer();
  }

  /** Takes the line as silent now, without waiting for it. */
  listenNoMore(): void {
    this.stopTimer();
    this.tell(this.answer.silence());
  }

  private startTimer(): void {
    this.stopTimer();
    this.brokenOff = setTimeout(() => {
      this.brokenOff = setTimeout(() => {
        this.listenNoMore();
      }, gatheringMs);
    }, this.options.t15Ms + gatheringMs);
  }

  private stopTimer(): void {
    if (this.brokenOff) clearTimeout(this.brokenOff);
    this.brokenOff = null;
  }

  private tell(heard: Heard): void {
    if (!heard) return;
    this.stopTimer();
    this.isSuspect = heard.kind !== 'answer';
    if (heard.kind === 'answer') this.emit('data', heard.frame);
    else this.emit('corrupt', heard.text);
  }
}
