import type { ActuatorLimit } from '../envelopes/envelope.schema.js';
import { nearestOnGrid } from '../envelopes/guard.js';
import type { Lookup } from '../expressions/expression.types.js';
import type { ObjectiveContent } from '../objectives/objective.schema.js';
import type { RunEventBody, Verdict } from '../runs/run-event.schema.js';
import { objectiveSymbol } from './expression-symbols.js';
import type { ActuatorRequest, SequencerContext, SequencerInput } from './sequencer.types.js';
import type { StepExit, StepRunner, StepServices } from './steps/step-runner.js';

interface Output {
  requests: ActuatorRequest[];
  events: readonly RunEventBody[];
  activeSteps: readonly string[];
  end: { verdict: Verdict; reason: string } | null;
}

const nothing: readonly never[] = [];

/** Share of the range within which two values of a continuous actuator are the same. */
const rangeSlack = 1e-9;

/** Share of a grid step within which two values are the same grid point. */
const gridShare = 1e-3;

/** What a run has asked for, found and decided so far; what its steps work with. */
export class RunLedger implements StepServices {
  readonly periodS: number;
  readonly objective: ObjectiveContent | null;
  readonly results = new Map<string, number>();
  readonly decisions: (boolean | null)[] = [];
  readonly output: Output = { requests: [], events: nothing, activeSteps: nothing, end: null };
  private readonly requestByChannel = new Map<string, ActuatorRequest>();
  private readonly limits: ReadonlyMap<string, ActuatorLimit>;
  private readonly resultsOfStep = new Map<string, Record<string, number>>();
  private events: RunEventBody[] = [];
  private input: SequencerInput | null = null;

  constructor(private readonly context: SequencerContext) {
    this.periodS = context.periodS;
    this.objective = context.objective;
    this.limits = new Map(context.envelope.limits.map((limit) => [limit.channel, limit]));
  }

  beginScan(input: SequencerInput): void {
    this.input = input;
    this.output.requests.length = 0;
    this.output.events = nothing;
    if (this.events.length > 0) this.events = [];
  }

  readonly lookup: Lookup = Object.assign((symbol: string) => this.numberOf(symbol), {
    trace: (symbol: string) => this.input?.readings.goodTrace(this.input.readings.indexOf(symbol)) ?? null,
  });

  private numberOf(symbol: string): number {
    const result = this.results.get(symbol);
    if (result !== undefined) return result;
    const { input } = this;
    if (!input) return NaN;
    if (symbol === objectiveSymbol) return input.objective.isValid ? input.objective.value : NaN;
    return input.readings.goodValue(input.readings.indexOf(symbol));
  }

  limitOf(channel: string): ActuatorLimit | undefined {
    return this.limits.get(channel);
  }

  gridStepOf(channel: string): number {
    return this.context.grids?.get(channel)?.step ?? 0;
  }

  nearestTo(channel: string, target: number): number {
    const limit = this.limits.get(channel);
    const grid = this.context.grids?.get(channel);
    if (!limit || !grid) return target;
    const point = nearestOnGrid(grid, target, limit.min, limit.max);
    return Number.isNaN(point) ? target : point;
  }

  toleranceOf(channel: string): number {
    const limit = this.limits.get(channel);
    if (!limit) return 0;
    const slack = (limit.max - limit.min) * rangeSlack;
    // Where no grid is known the approved read-back tolerance says what counts as being there.
    if (!this.context.grids) return Math.max(limit.readBackTolerance, slack);
    return this.gridStepOf(channel) * gridShare + slack;
  }

  request(channel: string, base: number, dither: number): void {
    let request = this.requestByChannel.get(channel);
    if (!request) {
      request = { channel, base, dither };
      this.requestByChannel.set(channel, request);
    }
    request.base = base;
    request.dither = dither;
    if (!this.output.requests.includes(request)) this.output.requests.push(request);
  }

  emit(event: RunEventBody): void {
    this.events.push(event);
    this.output.events = this.events;
  }

  setResult(stepId: string, suffix: string, value: number): void {
    if (!Number.isFinite(value)) return;
    const name = `${stepId}.${suffix}`;
    this.results.set(name, value);
    const ofStep = this.resultsOfStep.get(stepId) ?? {};
    this.resultsOfStep.set(stepId, { ...ofStep, [name]: value });
  }

  decide(isMet: boolean | null): void {
    this.decisions.push(isMet);
  }

  beginStep(runner: StepRunner): void {
    this.output.activeSteps = [runner.id];
    this.emit({ type: 'step.started', step: runner.id, kind: runner.kind });
  }

  endStep(runner: StepRunner, exit: StepExit): void {
    const results = this.resultsOfStep.get(runner.id) ?? {};
    const reason = exit.reason ? { reason: exit.reason } : {};
    this.emit({ type: 'step.ended', step: runner.id, port: exit.port ?? 'failed', results, ...reason });
  }

  /** Ends the run: nothing is asked of any actuator from now on. */
  end(verdict: Verdict, reason: string): void {
    this.output.end = { verdict, reason };
    this.output.activeSteps = nothing;
    this.output.requests.length = 0;
  }
}
