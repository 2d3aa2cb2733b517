import type { ScenarioInput } from '@cresthold/shared';

/** The parts of a scenario as they are written down, before the schemas fill in what may be left out. */
export type RigEntryInput = ScenarioInput['rigs'][number];
export type RigInput = RigEntryInput['rig'];
export type EnvelopeInput = RigEntryInput['envelope']['content'];
export type ObjectiveInput = RigEntryInput['objectives'][number]['content'];
export type ExperimentInput = RigEntryInput['experiments'][number]['content'];

/** Where a bench on TCP listens. */
export interface TcpPlace {
  readonly host: string;
  readonly port: number;
}

/** Where a bench on a serial line is. */
export interface LinePlace {
  readonly path: string;
}

/** An edge of an experiment, with an id of its own. */
export function edge(from: string, port: string, to: string) {
  return { id: `${from}-${port}-${to}`, from, port, to };
}

/** Where a step is drawn, px. */
export const at = (x: number, y: number) => ({ position: { x, y } });
