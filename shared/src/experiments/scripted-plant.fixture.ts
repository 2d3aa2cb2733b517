import type { RunEventBody, RunEventType, Verdict } from '../runs/run-event.schema.js';
import { compileObjective } from '../objectives/objective-evaluator.js';
import { Quality } from '../rigs/quality.js';
import { Readings } from '../scan/readings.js';
import type { ExperimentGraph } from './experiment.schema.js';
import { testEnvelope, testObjective, testRig } from './experiment.fixture.js';
import { createSequencer } from './sequencer.js';
import type { ActuatorRequest, Sequencer, SequencerContext } from './sequencer.types.js';

/** Readings of one scan by channel; missing ones are bad. */
export type Plant = (applied: Readonly<Record<string, number>>, tS: number) => Record<string, number>;

export interface Scan {
  tS: number;
  requests: ActuatorRequest[];
  applied: Record<string, number>;
  activeSteps: readonly string[];
  signals: number[];
}

export interface ScriptedRun {
  sequencer: Sequencer;
  events: { tS: number; body: RunEventBody }[];
  scans: Scan[];
  results: Record<string, number>;
  end: { verdict: Verdict; reason: string } | null;
  of: <T extends RunEventType>(type: T) => Extract<RunEventBody, { type: T }>[];
}

export interface Script extends Partial<SequencerContext> {
  graph: ExperimentGraph;
  plant: Plant;
  /** Where the actuators stand at first. */
  start?: Record<string, number>;
  forS?: number;
}

/** Drives a sequencer scan by scan: what it asks for is applied at the slew limit, then the plant answers. */
export function runScript({ plant, start, forS = 600, ...change }: Script): ScriptedRun {
  const context: SequencerContext = {
    rig: testRig(),
    envelope: testEnvelope(),
    objective: testObjective(),
    periodS: 0.05,
    ...change,
  };
  const { rig, envelope, objective, periodS } = context;
  const evaluator = objective ? compileObjective(objective, rig) : null;
  if (evaluator && !evaluator.isOk) throw new Error(evaluator.faults[0]?.message);
  const sequencer = createSequencer(context);
  const readings = new Readings(rig.channels.map(({ id }) => id));
  const held: Record<string, number> = { trim: 0, load: 0, ...start };
  const applied = { ...held };
  const run: ScriptedRun = { sequencer, events: [], scans: [], results: {}, end: null, of: ofType };
  function ofType<T extends RunEventType>(type: T) {
    return run.events
      .map(({ body }) => body)
      .filter((body): body is Extract<RunEventBody, { type: T }> => body.type === type);
  }
  for (let n = 0; n * periodS < forS && !run.end; n += 1) {
    const answer = plant(applied, n * periodS);
    readings.channelIds.forEach((id, i) => readings.set(i, answer[id] ?? NaN, Quality.good));
    const output = sequencer.step({
      tS: n * periodS,
      dtS: periodS,
      readings,
      objective: evaluator?.isOk
        ? evaluator.objective.evaluate(readings)
        : { value: NaN, isGood: false, isValid: false },
      applied: (channel) => applied[channel] ?? NaN,
      held: (channel) => held[channel] ?? NaN,
    });
    for (const { channel, base, dither } of output.requests) {
      const step = (envelope.limits.find((limit) => limit.channel === channel)?.slewPerS ?? 0) * periodS;
      const towards = (from: number, to: number) => from + Math.max(-step, Math.min(step, to - from));
      held[channel] = towards(held[channel] ?? NaN, base);
      applied[channel] = towards(applied[channel] ?? NaN, base + dither);
    }
    run.events.push(...output.events.map((body) => ({ tS: n * periodS, body })));
    run.scans.push({
      tS: n * periodS,
      requests: output.requests.map((request) => ({ ...request })),
      applied: { ...applied },
      activeSteps: output.activeSteps,
      signals: [...sequencer.signals],
    });
    run.end = output.end;
  }
  run.results = Object.fromEntries(sequencer.results);
  return run;
}

/** A plant with its best yield of 90 at trim 2, lit all the time. */
export const hill: Plant = ({ trim = NaN }) => ({ yield: 90 - (trim - 2) ** 2, flame: 1 });
