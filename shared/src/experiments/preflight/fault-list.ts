import type { EnvelopeContent } from '../../envelopes/envelope.schema.js';
import type { ObjectiveContent } from '../../objectives/objective.schema.js';
import type { Rig } from '../../rigs/rig.schema.js';
import type { ValueGrid } from '../../scan/scan-engine.types.js';
import type { ExperimentGraph } from '../experiment.schema.js';
import type { PreflightFault } from '../preflight.types.js';
import type { StepOrder } from '../step-order.js';

/** What preflight judges an experiment against. */
export interface PreflightInput {
  graph: ExperimentGraph;
  /** Null where the experiment has chosen none. */
  objective: ObjectiveContent | null;
  rig: Rig;
  /** The envelope in force; null where there is none. */
  envelope: EnvelopeContent | null;
  /** Grid of values of each actuator's wire, where known. */
  grids?: ReadonlyMap<string, ValueGrid>;
}

export interface PreflightCase extends PreflightInput {
  order: StepOrder;
  faults: FaultList;
}

/** Collects what preflight finds. */
export class FaultList {
  readonly faults: PreflightFault[] = [];

  error(code: string, step: string | null, field: string | null, message: string): void {
    this.faults.push({ severity: 'error', code: `preflight.${code}`, step, field, message });
  }

  warning(code: string, step: string | null, field: string | null, message: string): void {
    this.faults.push({ severity: 'warning', code: `preflight.${code}`, step, field, message });
  }
}
