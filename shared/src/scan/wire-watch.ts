import type { ScanInput } from './scan-engine.types.js';

type Lost = ScanInput['lostConnections'][number];

/** Which connections are down, and what has changed since the scan before. */
export class WireWatch {
  /** Connections that went down with this scan. Reused: copy to keep. */
  readonly newlyLost: Lost[] = [];
  /** Connections that came up with this scan. Reused: copy to keep. */
  readonly restored: string[] = [];
  private readonly lost = new Map<string, Lost>();
  private hasBegun = false;

  /** @realtime safe: allocates nothing while every connection is up */
  update(lostConnections: readonly Lost[]): void {
    this.newlyLost.length = 0;
    this.restored.length = 0;
    this.hasBegun = true;
    if (lostConnections.length === 0 && this.lost.size === 0) return;
    for (const id of this.lost.keys()) {
      if (!lostConnections.some(({ connection }) => connection === id)) this.restored.push(id);
    }
    for (const id of this.restored) this.lost.delete(id);
    for (const lost of lostConnections) {
      if (!this.lost.has(lost.connection)) this.newlyLost.push(lost);
      this.lost.set(lost.connection, lost);
    }
  }

  /** Before the first scan every connection counts as down. */
  isLost(connection: string): boolean {
    return !this.hasBegun || this.lost.has(connection);
  }

  isAllUp(): boolean {
    return this.hasBegun && this.lost.size === 0;
  }

  lostIds(): string[] {
    return [...this.lost.keys()];
  }
}
