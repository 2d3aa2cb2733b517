import type { RigStatus } from '@cresthold/shared';
import { FrameBatch, type RequestFrame } from './frame-batch.js';

/** The last status of every rig, as it came by the live link. */
export class StatusStore {
  private statuses: ReadonlyMap<string, RigStatus> = new Map();
  private readonly batch: FrameBatch;
  readonly subscribe: FrameBatch['subscribe'];

  constructor(requestFrame: RequestFrame) {
    this.batch = new FrameBatch(requestFrame);
    this.subscribe = this.batch.subscribe;
  }

  take(status: RigStatus): void {
    this.statuses = new Map(this.statuses).set(status.rigId, status);
    this.batch.changed();
  }

  of(rigId: string): RigStatus | undefined {
    return this.statuses.get(rigId);
  }

  readonly all = (): ReadonlyMap<string, RigStatus> => this.statuses;
}
