import type { ScanInput, ScanOutput } from '@cresthold/shared';
import type { ScanSink } from './scan-loop.js';

interface LogLink {
  log(level: 'info' | 'warn' | 'error', text: string): void;
}

/** Says in the server's log that a held move ended because nobody renewed it; manual moves belong to no run. */
export class HeldMoveLog implements ScanSink {
  constructor(private readonly link: LogLink) {}

  onScan(_input: ScanInput, { events }: ScanOutput): void {
    for (const { body } of events) {
      if (body.type !== 'move.hold-timed-out') continue;
      this.link.log('warn', `The held move of "${body.channel}" was not renewed in time: it stopped.`);
    }
  }
}
