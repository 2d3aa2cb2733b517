import fc from 'fast-check';
import { expect } from 'vitest';
import { lawCaseAt, lawCases } from './law.fixture.js';
import type { SeekingInput, SeekingLaw, SeekingState } from './seeking-law.js';
import { wideSearch } from './wide-search.js';

interface WildCase {
  law: number;
  /** Half width, middle and dither of each box. */
  boxes: { middle: number; half: number; amplitude: number }[];
  start: number[];
  inputs: { objective: number; isValid: boolean; measured: number; constraint: number; dtS: number }[];
}

const wildNumber = fc.oneof(
  { weight: 6, arbitrary: fc.double({ min: -100, max: 100, noNaN: true }) },
  { weight: 1, arbitrary: fc.double() },
  { weight: 1, arbitrary: fc.constantFrom(NaN, Infinity, -Infinity, 1e99, -1e99, 1.7e308, 5e-324, 0) },
);

const wildStep = fc.record({
  objective: wildNumber,
  isValid: fc.oneof({ weight: 6, arbitrary: fc.constant(true) }, { weight: 1, arbitrary: fc.boolean() }),
  measured: wildNumber,
  constraint: wildNumber,
  dtS: fc.oneof(
    { weight: 8, arbitrary: fc.double({ min: 1e-3, max: 0.5, noNaN: true }) },
    { weight: 1, arbitrary: fc.constantFrom(0, NaN, -1, 1e5, Infinity) },
  ),
});

export const wildCases: fc.Arbitrary<WildCase> = fc.record({
  law: fc.nat(lawCases.length),
  boxes: fc.array(
    fc.record({
      middle: fc.double({ min: -1e3, max: 1e3, noNaN: true }),
      half: fc.double({ min: 1e-3, max: 1e3, noNaN: true }),
      amplitude: fc.double({ min: 1e-3, max: 0.99, noNaN: true }),
    }),
    { minLength: 1, maxLength: 3 },
  ),
  start: fc.array(wildNumber, { minLength: 3, maxLength: 3 }),
  inputs: fc.array(wildStep, { minLength: 1, maxLength: 120, size: 'max' }),
});

const visit = {
  starts: [[-50], [0, 7], [1e9]],
  settleS: 0.2,
  seekS: 1,
  averageS: 0.3,
  everyS: 3,
  advantage: 0,
};

/** The law of a case and its parameters; the number after the last is a wide search round the first. */
function lawOf({ law: index, boxes }: WildCase): [SeekingLaw<object, SeekingState>, object] {
  const { law, parameters } = lawCaseAt(lawCases, index % lawCases.length);
  const own = parameters(
    boxes.map(({ middle, half, amplitude }) => ({
      min: middle - half,
      max: middle + half,
      amplitude: amplitude * half,
    })),
  );
  if (index < lawCases.length) return [law, own];
  return [wideSearch(law), { law: own, visit }];
}

/** What the property tests met, so that they show that they were no idle walk. */
export interface LawTally {
  steps: number;
  atEdge: number;
  retreats: number;
  moved: number;
}

export function checkWildCase(wild: WildCase, tally: LawTally): void {
  const [law, parameters] = lawOf(wild);
  const { axes } = ('law' in parameters ? parameters.law : parameters) as {
    axes: { min: number; max: number; amplitude: number }[];
  };
  const state = law.init(parameters, wild.start.slice(0, axes.length));
  expect(state.signals.length).toBe(law.signalNames(axes.length).length);
  const [from = NaN] = state.estimate;
  for (const { objective, isValid, measured, constraint, dtS } of wild.inputs) {
    const input: SeekingInput = {
      objective,
      isValid,
      measured: axes.map(() => measured),
      constraint,
      bound: 0.5,
    };
    law.step(state, input, dtS);
    tally.steps += 1;
    if (state.isRetreated) tally.retreats += 1;
    axes.forEach(({ min, max, amplitude }, i) => {
      const [estimate = NaN, dither = NaN] = [state.estimate[i], state.dither[i]];
      // Written so that NaN fails.
      if (!(estimate + dither >= min && estimate + dither <= max)) {
        throw new Error(`${law.id}: ${estimate} + ${dither} is outside ${min} to ${max}.`);
      }
      const rounding = 1e-15 * Math.max(Math.abs(min), Math.abs(max));
      if (!(Math.abs(dither) <= amplitude * (1 + 1e-12) + rounding)) {
        throw new Error(`${law.id}: the dither ${dither} is above ${amplitude}.`);
      }
      if (estimate === state.highest[i] || estimate === state.lowest[i]) tally.atEdge += 1;
    });
    refuseNumbersThatAreNone(law.id, state);
  }
  if (state.estimate[0] !== from) tally.moved += 1;
}

/** Members that say "nothing yet" by NaN. */
const mayBeEmpty = new Set([
  'signals',
  'lastMeans',
  'low',
  'lastInput',
  'lastObjective',
  'above',
  'before',
  'reference',
]);

/** Throws where a NaN has entered a state: anywhere in it, but for members that are empty together. */
function refuseNumbersThatAreNone(id: string, value: unknown, path = ''): void {
  if (typeof value === 'number') {
    if (Number.isNaN(value)) throw new Error(`${id}: NaN in ${path}.`);
  } else if (value instanceof Float64Array) {
    if (value.some(Number.isNaN)) throw new Error(`${id}: NaN in ${path}.`);
  } else if (typeof value === 'object' && value !== null) {
    for (const [name, member] of Object.entries(value)) {
      // What an idle law was told is no state; a filter is empty or whole.
      if (mayBeEmpty.has(name) || name === 'parameters' || name === 'axes' || name === 'axis') continue;
      refuseNumbersThatAreNone(id, member, `${path}.${name}`);
    }
    const filter = value as { low?: number; lastInput?: number };
    if (filter.low !== undefined && Number.isNaN(filter.low) !== Number.isNaN(filter.lastInput)) {
      throw new Error(`${id}: NaN in the filter ${path}.`);
    }
  }
}

/** After anything, a run of good inputs finds the law at work again: no NaN stays hidden in a filter. */
export function checkRecovery(wild: WildCase): void {
  const [law, parameters] = lawOf(wild);
  const state = law.init(parameters, wild.start);
  const actuators = state.estimate.length;
  for (const { objective, isValid, measured, constraint, dtS } of wild.inputs) {
    const told = {
      objective,
      isValid,
      measured: new Array<number>(actuators).fill(measured),
      constraint,
      bound: 0.5,
    };
    law.step(state, told, dtS);
  }
  for (let i = 0; i < 50; i += 1) {
    const measured = new Array<number>(actuators).fill(Math.sin(i));
    law.step(state, { objective: Math.sin(i), isValid: true, measured, constraint: 1, bound: 0.5 }, 0.02);
  }
  const hidden = [...state.signals.slice(0, law.signalNames(actuators).length)].filter(Number.isNaN);
  const { phase, own } = state as { phase?: string; own?: { isReturning?: boolean } };
  const isReturning = own?.isReturning ?? false;
  const isIdle = phase !== undefined || isReturning;
  // Laws that try points and a wide search show a gradient only after a whole trial; a law whose speed is bounded
  // may be on its way back still.
  if (!isIdle && law.id !== 'spsa' && law.id !== 'perturb-observe') expect(hidden).toEqual([]);
}
