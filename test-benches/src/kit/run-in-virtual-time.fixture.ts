import type { ExperimentContent, ObjectiveContent, ScanOutput } from '@cresthold/shared';
import type { BenchModel } from './bench-model.js';
import { VirtualBench, type VirtualBenchSettings } from './virtual-bench.fixture.js';

/** A bench, and the experiment to run on it. */
export interface VirtualRun<M extends BenchModel> extends VirtualBenchSettings<M> {
  readonly experiment: ExperimentContent;
  readonly objective: ObjectiveContent | null;
  /** Time before the run, s: for heartbeats to be believed, and for the drift to stand elsewhere. */
  readonly warmUpS?: number;
  /** Where the run has not ended by then, it is left as it stands, s. */
  readonly atMostS: number;
  /** Times between scans, s; the rig's period where left out. */
  readonly dtS?: () => number;
}

/** What one scan of the run found: the truth of the bench, and where the run stood. */
export interface VirtualMoment {
  readonly tS: number;
  readonly steps: readonly string[];
  /** True shortfall behind the true best, in the unit of the objective; null where it means nothing. */
  readonly loss: number | null;
  /** What was to be had at the true best, in the unit of the objective. */
  readonly bestObjective: number;
  readonly at: Readonly<Record<string, number>>;
  readonly best: Readonly<Record<string, number>>;
}

export interface VirtualCourse<M extends BenchModel> {
  readonly bench: VirtualBench<M>;
  readonly moments: readonly VirtualMoment[];
  /** Steps that ended, as `step.port`. */
  readonly ended: readonly string[];
  /** How often the guard had to change a value. */
  readonly interventions: number;
  readonly writesOutside: number;
  /** Null where the run did not end in its time. */
  readonly runEnded: ScanOutput['runEnded'];
  /** Code of the first trip; null for none. */
  readonly trip: string | null;
}

/** Runs an experiment on a bench's model to its end, through the real engine. */
export function runInVirtualTime<M extends BenchModel>(run: VirtualRun<M>): VirtualCourse<M> {
  const bench = new VirtualBench(run);
  bench.scanFor(run.warmUpS ?? 3);
  const { title, graph } = run.experiment;
  bench.start({ experiment: { id: 'shipped', title, version: 1, graph }, objective: run.objective });
  const beginS = bench.tS;
  const moments: VirtualMoment[] = [];
  const ended: string[] = [];
  let interventions = 0;
  let runEnded: ScanOutput['runEnded'] = null;
  while (runEnded === null && bench.tS - beginS < run.atMostS) {
    const output = bench.scan(run.dtS?.());
    for (const { body } of output.events) {
      if (body.type === 'guard.intervened') interventions += 1;
      if (body.type === 'step.ended') ended.push(`${body.step}.${body.port}`);
    }
    ({ runEnded } = output);
    const { loss, bestObjective, at, best } = bench.model.truth;
    const steps = bench.engine.status().activeSteps;
    moments.push({ tS: bench.tS - beginS, steps, loss, bestObjective, at, best });
  }
  const writesOutside = bench.writesOutside(run.envelope);
  const trip = bench.engine.status().trip?.cause ?? null;
  return { bench, moments, ended, interventions, writesOutside, runEnded, trip };
}

/** Mean true loss over the last `forS` of a step; NaN where it meant nothing at any moment of it. */
export function meanLossAtEnd(course: VirtualCourse<BenchModel>, step: string, forS: number): number {
  const during = course.moments.filter(({ steps }) => steps.includes(step));
  const endS = during.at(-1)?.tS ?? NaN;
  const last = during.filter(({ tS }) => tS > endS - forS);
  return last.reduce((sum, { loss }) => sum + (loss ?? NaN), 0) / last.length;
}
