import type { RunEntity } from '../recordings/entities/run.entity.js';
import type { Run } from './dto/run.dto.js';

/** A run's row as the API shows it: without what is the server's own. */
export function toRun({ idempotencyKey: _, rig: _rig, ...run }: RunEntity): Run {
  return run;
}
