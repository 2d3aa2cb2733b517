import type { InterlockResponse, ScanEngine, ScanInput, ScanOutput } from '@cresthold/shared';

/** The beginning of an episode: the scan in which a condition became true. */
interface Beginning {
  tS: number;
  atMs: number;
}

/**
 * Measures how quickly interlocks act: from the beginning of the scan in which a condition became true until the
 * device has answered the writes of the scan in which the interlock acted. The condition became true on the rig up
 * to one period earlier: nobody can see that from here.
 */
export class InterlockStopwatch {
  private readonly beginnings = new Map<string, Beginning>();
  private acted: (Beginning & Omit<InterlockResponse, 'responseMs'>)[] = [];

  constructor(
    private readonly engine: Pick<ScanEngine, 'status'>,
    private readonly tell: (response: InterlockResponse) => void,
  ) {}

  /** @realtime looks closer only in a scan in which something changed */
  onScan({ tS, atMs }: Pick<ScanInput, 'tS' | 'atMs'>, output: ScanOutput): void {
    if (!output.isStatusChanged) return;
    for (const { id, state, isForced } of this.engine.status().interlocks) {
      if (state === 'clear' || state === 'latched') {
        this.beginnings.delete(id);
        continue;
      }
      const known = this.beginnings.get(id);
      const beginning = known ?? { tS, atMs };
      if (!known) this.beginnings.set(id, beginning);
      const hasActed = output.events.some(
        ({ body }) => body.type === 'interlock.acted' && body.interlock === id,
      );
      if (hasActed) this.acted.push({ ...beginning, interlock: id, writes: writesIn(output), isForced });
    }
  }

  /** @param nowS monotonic time at which the device had answered, s */
  onWritten(nowS: number): void {
    if (this.acted.length === 0) return;
    for (const { tS, atMs, interlock, writes, isForced } of this.acted) {
      this.tell({ interlock, atMs, writes, isForced, responseMs: 1000 * (nowS - tS) });
    }
    this.acted = [];
  }
}

/** Actuators written in this scan; the heartbeat is none of them. */
function writesIn({ applied }: ScanOutput): number {
  let count = 0;
  for (const value of applied) if (!Number.isNaN(value)) count += 1;
  return count;
}
