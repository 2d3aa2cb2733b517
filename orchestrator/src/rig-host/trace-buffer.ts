import { traceLead, type TraceBatch } from '../recordings/run-file/index.js';

/** Traces and points that a new buffer holds; it grows where a batch needs more. */
const firstTraces = 16;
const firstPoints = 8192;

/** The memory of a batch, to be transferred with it. */
export function buffersOf(batch: TraceBatch | null): ArrayBuffer[] {
  return batch === null ? [] : [batch.heads.buffer, batch.points.buffer];
}

/**
 * Collects the traces of a batch by copying them. Buffers that the recorder thread gives back are used again, so that
 * nothing is allocated once they are large enough.
 */
export class TraceBuffer {
  private readonly free: TraceBatch[] = [];
  private batch: TraceBatch | null = null;
  /** Points that the batch holds. */
  private filled = 0;

  /** @realtime copies the points; takes memory only where a batch is larger than any before */
  append(k: number, channel: number, points: Float32Array): void {
    const batch = this.roomFor(points.length);
    const at = batch.count * traceLead;
    batch.heads[at] = k;
    batch.heads[at + 1] = channel;
    batch.heads[at + 2] = points.length;
    batch.points.set(points, this.filled);
    batch.count += 1;
    this.filled += points.length;
  }

  /** What was collected, to be handed over; null where there is nothing. */
  take(): TraceBatch | null {
    const { batch } = this;
    this.batch = null;
    this.filled = 0;
    return batch;
  }

  /** Takes a batch back that was written. */
  giveBack(batch: TraceBatch): void {
    this.free.push(batch);
  }

  private roomFor(length: number): TraceBatch {
    this.batch ??= this.empty();
    const { heads, points, count } = this.batch;
    if ((count + 1) * traceLead > heads.length) this.batch.heads = grown(Float64Array, heads, heads.length);
    if (this.filled + length > points.length) this.batch.points = grown(Float32Array, points, length);
    return this.batch;
  }

  private empty(): TraceBatch {
    const batch = this.free.pop() ?? {
      heads: new Float64Array(firstTraces * traceLead),
      points: new Float32Array(firstPoints),
      count: 0,
    };
    batch.count = 0;
    return batch;
  }
}

/** The same numbers in an array at least twice as long, with room for some more. */
function grown<T extends Float32Array<ArrayBuffer> | Float64Array<ArrayBuffer>>(
  kind: new (length: number) => T,
  array: T,
  more: number,
): T {
  const larger = new kind(2 * array.length + more);
  larger.set(array);
  return larger;
}
