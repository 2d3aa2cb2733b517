import { z } from 'zod';
import { createDwell, restartDwell, stepDwell, type Dwell } from './dwell.js';
import { parameter } from './law-parameters.js';
import { held } from './seek-box.js';
import { at } from './seek-core.js';
import type { SeekingInput, SeekingLaw, SeekingState } from './seeking-law.js';
import { isUsable } from './usable-number.js';

const duration = z.number().min(0).max(1e9);

/** How starts are visited and when again. */
export const visitSchema = z.object({
  starts: parameter(
    z.array(z.array(z.number()).min(1)).min(1).max(10_000),
    'Starts',
    'actuator units',
    'Points that are visited, one value per actuator each: a grid for a survey, a few spread points for multi-start.',
  ),
  settleS: parameter(duration, 'Settling', 's', 'After each move: until actuator and plant have arrived.'),
  seekS: parameter(
    duration,
    'Seeking',
    's',
    'Seeks so long from each start before it is judged; 0 for a survey.',
  ),
  averageS: parameter(
    z.number().positive().max(1e9),
    'Averaging',
    's',
    'Time over which the objective is averaged at each point, without dither.',
  ),
  everyS: parameter(
    z.number().positive().max(1e12).nullable().default(null),
    'Again every',
    's',
    'Visits all starts again after so long, to notice that another hill has become the highest; empty for once.',
  ),
  advantage: parameter(
    z.number().min(0).max(1e12).default(0),
    'Least advantage',
    'objective unit',
    'By so much must another start be better than the point that is held.',
  ),
});
export type Visit = z.infer<typeof visitSchema>;

export interface WideSearchParameters<P extends object> {
  visit: Visit;
  law: P;
}

type Phase = 'settle' | 'seek' | 'average' | 'hold';

export interface WideSearchState<P extends object, S extends SeekingState> extends SeekingState {
  readonly parameters: WideSearchParameters<P>;
  readonly inner: S;
  /** Points of the present round: that which is held, then the starts; each moved by seeking from it. */
  readonly points: readonly Float64Array[];
  /** Mean of the objective at each; −Infinity where it was not valid. */
  readonly scores: Float64Array;
  phase: Phase;
  visited: number;
  elapsedS: number;
  readonly dwell: Dwell;
  /** The inner law is told this while it waits. */
  readonly waiting: SeekingInput;
  isRetreated: boolean;
}

const phases: readonly Phase[] = ['hold', 'settle', 'seek', 'average'];
const ownSignals = ['searchPhase', 'searchPoint', 'bestScore'];

/**
 * Wide search round any law, for maps with several hills: visits the point that is held and all starts, averages
 * the objective at each (after seeking from it for `seekS`), goes to the best and seeks from there; again after
 * `everyS`. With a grid of starts and `seekS` 0 it is survey → choose → seek, with a few starts and `seekS` above
 * 0 it is multi-start. A point at which the objective is not valid is left at once and not chosen. The inner law
 * is sent from point to point by its own retreat, so that filters and validity are its own business.
 *
 * @source multi-start is folklore of global optimisation; see e.g. F. Schoen (1991), "Stochastic techniques for
 * global optimization", Journal of Global Optimization 1:207–228 (from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export function wideSearch<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
): SeekingLaw<WideSearchParameters<P>, WideSearchState<P, S>> {
  return {
    id: `wide-${law.id}`,
    title: `${law.title} with wide search`,
    purpose: `Visits many points first and seeks from the best. ${law.purpose}`,
    source: law.source,
    actuatorsMax: law.actuatorsMax,
    ditherKinds: law.ditherKinds,
    parametersSchema: z.object({ visit: visitSchema, law: law.parametersSchema }),

    signalNames: (actuators) => [...law.signalNames(actuators), ...ownSignals],

    init: (parameters, start) => initial(law, parameters, start),

    step(state, input, dtS) {
      stepSearch(law, state, input, dtS);
      state.isRetreated = state.phase === 'hold' && state.inner.isRetreated;
      state.settleS = state.phase === 'hold' ? state.inner.settleS : Infinity;
      writeSignals(state);
    },
  };
}

function initial<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
  parameters: WideSearchParameters<P>,
  start: ArrayLike<number>,
): WideSearchState<P, S> {
  const inner = law.init(parameters.law, start);
  const { estimate, dither, lowest, highest, lastGood, signals } = inner;
  const points = [
    estimate.slice(),
    ...parameters.visit.starts.map((point) =>
      Float64Array.from(estimate, (_, i) => held(point[i] ?? at(estimate, i), at(lowest, i), at(highest, i))),
    ),
  ];
  const state: WideSearchState<P, S> = {
    parameters,
    inner,
    estimate,
    dither,
    lowest,
    highest,
    lastGood,
    signals: new Float64Array(signals.length + ownSignals.length).fill(NaN),
    settleS: Infinity,
    isRetreated: false,
    points,
    scores: new Float64Array(points.length).fill(-Infinity),
    phase: 'settle',
    visited: 0,
    elapsedS: 0,
    dwell: createDwell(),
    waiting: { objective: 0, isValid: false },
  };
  writeSignals(state);
  return state;
}

function stepSearch<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
  state: WideSearchState<P, S>,
  input: SeekingInput,
  dtS: number,
): void {
  const { phase, inner, waiting } = state;
  const { seekS, settleS, averageS, everyS } = state.parameters.visit;
  if (!(dtS > 0)) {
    law.step(inner, waiting, dtS);
    return;
  }
  state.elapsedS += dtS;
  const elapsedS = state.elapsedS + dtS / 2;
  if (phase === 'hold') {
    law.step(inner, input, dtS);
    if (everyS !== null && elapsedS >= everyS) beginRound(law, state, dtS);
    return;
  }
  if (phase === 'seek') {
    law.step(inner, input, dtS);
    if (elapsedS >= seekS) stay(law, state, 'average', dtS);
    return;
  }
  law.step(inner, waiting, dtS);
  const isValid = input.isValid && isUsable(input.objective);
  if (phase === 'settle') {
    if (elapsedS >= settleS) enter(state, seekS > 0 ? 'seek' : 'average');
  } else if (!isValid) leave(law, state, -Infinity, dtS);
  else if (stepDwell(state.dwell, averageS, 0, input.objective, dtS)) {
    leave(law, state, state.dwell.sum / state.dwell.count, dtS);
  }
}

function enter<P extends object, S extends SeekingState>(state: WideSearchState<P, S>, phase: Phase): void {
  state.phase = phase;
  state.elapsedS = 0;
  restartDwell(state.dwell);
}

/** Ends the dither and keeps the estimate that was found. */
function stay<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
  state: WideSearchState<P, S>,
  phase: Phase,
  dtS: number,
): void {
  const point = state.points[state.visited] as Float64Array;
  point.set(state.inner.estimate);
  goTo(law, state, point, dtS);
  enter(state, phase);
}

/** Sends the inner law to a point, where it waits without dither. */
function goTo<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
  { inner, waiting }: WideSearchState<P, S>,
  point: Float64Array,
  dtS: number,
): void {
  inner.lastGood.set(point);
  law.step(inner, waiting, dtS);
}

function beginRound<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
  state: WideSearchState<P, S>,
  dtS: number,
): void {
  const { points, parameters, lowest, highest } = state;
  const { starts } = parameters.visit;
  for (let k = 0; k < starts.length; k += 1) {
    const start = starts[k] as readonly number[];
    const point = points[k + 1] as Float64Array;
    for (let i = 0; i < point.length; i += 1) {
      point[i] = held(start[i] ?? at(point, i), at(lowest, i), at(highest, i));
    }
  }
  state.scores.fill(-Infinity);
  state.visited = 0;
  stay(law, state, 'settle', dtS);
}

/** Notes what a point was worth and goes to the next, or to the best after the last. */
function leave<P extends object, S extends SeekingState>(
  law: SeekingLaw<P, S>,
  state: WideSearchState<P, S>,
  score: number,
  dtS: number,
): void {
  state.scores[state.visited] = score;
  state.visited += 1;
  const isLast = state.visited >= state.points.length;
  const next = isLast ? bestOf(state.scores, state.parameters.visit.advantage) : state.visited;
  state.visited = next;
  goTo(law, state, state.points[next] as Float64Array, dtS);
  enter(state, isLast ? 'hold' : 'settle');
}

/** The first point, unless another is better by the advantage. */
function bestOf(scores: Float64Array, advantage: number): number {
  let best = 0;
  for (let i = 1; i < scores.length; i += 1) if (at(scores, i) > at(scores, best)) best = i;
  return at(scores, best) > at(scores, 0) + advantage ? best : 0;
}

function writeSignals<P extends object, S extends SeekingState>(state: WideSearchState<P, S>): void {
  const { signals, inner, scores } = state;
  const from = inner.signals.length;
  signals.set(inner.signals);
  signals[from] = phases.indexOf(state.phase);
  signals[from + 1] = state.visited;
  let best = -Infinity;
  for (let i = 0; i < scores.length; i += 1) best = Math.max(best, at(scores, i));
  signals[from + 2] = best === -Infinity ? NaN : best;
}
