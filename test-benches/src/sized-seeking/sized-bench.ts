import type { BenchModel, ModelSettings } from '../kit/bench-model.js';

/** An actuator of a bench as an envelope would have it. */
export interface SizedActuator {
  /** Name of the model's value. */
  readonly name: string;
  readonly min: number;
  readonly max: number;
  /** Step of its register. */
  readonly resolution: number;
  /** Greatest speed, actuator unit / s; null where the device sets no limit that matters. */
  readonly slewPerS: number | null;
  /** Greatest speed of the best point by the bench's drift, actuator unit / s. */
  readonly driftPerS: number;
}

/** What a test engineer knows of a bench before anything was measured, and wants of it. */
export interface SizedBench {
  readonly title: string;
  make(settings: ModelSettings): BenchModel;
  readonly isDrifting: boolean;
  /** Bench time from scan to scan, s. */
  readonly scanS: number;
  readonly actuators: readonly SizedActuator[];
  /** To be made large, from the instruments' readings; the same unit as the loss of the bench's truth. */
  objective(model: BenchModel): number;
  /** What an operator does by hand meanwhile, e.g. reset a generator. */
  eachScan?(model: BenchModel): void;
  /** Ripple that the plant has by itself, one entry for each actuator, and bands that dithers keep off, Hz. */
  readonly ripples?: readonly { readonly amplitude: number; readonly periodS: number }[];
  readonly forbidden?: readonly { readonly fromHz: number; readonly toHz: number }[];
  /** Mean loss by the dithers that is allowed, unit of the objective. */
  readonly lossAllowed: number;
  /** Points of the first survey along each actuator, and of the second around its best. */
  readonly coarsePoints: number;
  readonly finePoints: number;
  /** Time that a point of a survey is waited for and averaged over, s. */
  readonly dwellS: number;
}
