import type { RigModel } from '@cresthold/shared';
import type { WatchdogState } from './heartbeat-watchdog.js';

/** What every bench can be told at its start. */
export interface ModelSettings {
  /** Any integer; same seed, same writes at the same bench times: same course. */
  readonly seed: number;
  readonly isNoisy: boolean;
  readonly isDrifting: boolean;
}

/** What only the bench knows, for scoring: it goes into its log and never over its wire. */
export interface BenchTruth {
  /** What is to be made best, without lag and noise; null where it means nothing, e.g. with the flame out. */
  readonly objective: number | null;
  /** The same at the true best point of this moment. */
  readonly bestObjective: number;
  /** How much worse than the best this moment is, in the unit of the objective, never negative; null as above. */
  readonly loss: number | null;
  /** Where the actuators really are, by name. */
  readonly at: Readonly<Record<string, number>>;
  /** Where they would be best now, by name. */
  readonly best: Readonly<Record<string, number>>;
}

/**
 * A rig in virtual time that a bench serves over its wire: a RigModel with a watchdog of its own and a true
 * optimum. Command values read back what was last taken; instruments and drift go by `tS`, bench time in s.
 */
export interface BenchModel extends RigModel {
  readonly watchdog: Readonly<WatchdogState>;
  readonly truth: BenchTruth;
  /** As after its controller lost power: commands at rest, watchdog waiting; hidden state and time go on. */
  reboot(): void;
}

/** A fault that only this bench can play. */
export interface OwnFault<M extends BenchModel = BenchModel> {
  /** As in `--fault NAME@FROM`. */
  readonly name: string;
  /** One line for usage and README. */
  readonly what: string;
  /** Called once when the fault begins. */
  begin(model: M): void;
  /** Called when it ends; left out where it is over at once. */
  end?(model: M): void;
}
