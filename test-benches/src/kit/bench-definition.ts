import type { z } from 'zod';
import type { BenchModel, ModelSettings, OwnFault } from './bench-model.js';
import type { CommandMap } from './command-map.types.js';
import type { RegisterMap } from './register-map.types.js';

/** How a bench is reached. */
export type BenchWire =
  | { readonly kind: 'modbus-tcp'; readonly registers: RegisterMap }
  | { readonly kind: 'modbus-rtu'; readonly registers: RegisterMap }
  | { readonly kind: 'serial-text'; readonly commands: CommandMap };

/** An option that only this bench has: `--name VALUE`. The schema gets text, or undefined where not given. */
export interface OwnOption {
  readonly schema: z.ZodType;
  /** What stands beside it in the usage, with its default. */
  readonly usage: string;
}

/** All that the kit must know of a bench; `runBench` makes a program of it. */
export interface BenchDefinition<M extends BenchModel = BenchModel> {
  /** As in `npm run start-bench -- NAME`. */
  readonly name: string;
  readonly title: string;
  readonly wire: BenchWire;
  /** Bench seconds per second unless told otherwise. */
  readonly speed: number;
  /** Value that the fault `nan` strikes where none is named. */
  readonly nanValue: string;
  readonly ownOptions?: Readonly<Record<string, OwnOption>>;
  readonly ownFaults?: readonly OwnFault<M>[];
  /** @param own values of the own options, parsed, by name */
  makeModel(settings: ModelSettings, own: Readonly<Record<string, unknown>>): M;
}
