import type { SeekCore } from '../../seeking/seek-core.js';
import type { SeekingInput, SeekingLaw, SeekingState } from '../../seeking/seeking-law.js';
import { seekingLaws, type SeekingLawId } from '../../seeking/seeking-laws.js';
import { wideSearch, type Visit, type WideSearchState } from '../../seeking/wide-search.js';

/** Any law: its parameters were judged by its own schema before it sees them. */
type AnyLaw = SeekingLaw<object, SeekCore>;
type Search = WideSearchState<object, SeekCore>;

/** A law at work, alone or with a wide search round it. */
export interface LawAtWork {
  readonly state: SeekingState;
  /** State of the law itself. */
  readonly core: SeekCore;
  /** The wide search round it; null for none. */
  readonly search: Search | null;
  step(input: SeekingInput, dtS: number): void;
}

function lawOf(id: SeekingLawId): AnyLaw {
  return seekingLaws[id];
}

/** The law with its signals, with those of a wide search where there is one. */
export function signalsOf(id: SeekingLawId, isWide: boolean): Pick<AnyLaw, 'signalNames'> {
  return isWide ? wideSearch(lawOf(id)) : lawOf(id);
}

/** @param visit how a wide search looks around; null for none */
export function beginLaw(
  id: SeekingLawId,
  parameters: object,
  visit: Visit | null,
  start: ArrayLike<number>,
): LawAtWork {
  const law = lawOf(id);
  if (!visit) {
    const state = law.init(parameters, start);
    return { state, core: state, search: null, step: (input, dtS) => law.step(state, input, dtS) };
  }
  const wide = wideSearch(law);
  const state = wide.init({ visit, law: parameters }, start);
  return {
    state,
    core: state.inner,
    search: state,
    step: (input, dtS) => wide.step(state, input, dtS),
  };
}

/** Whether a wide search is on its way round, so that its place says nothing about the best. */
export function isSearching({ search }: LawAtWork): boolean {
  return search !== null && search.phase !== 'hold';
}

/** Whether a wide search only waits for the actuators to arrive and the plant to settle. */
export function isTravelling({ search }: LawAtWork): boolean {
  return search?.phase === 'settle';
}

/** The best place that is known, actuator units: of a search under way the best of those that it has judged. */
export function bestKnown(law: LawAtWork): ArrayLike<number> {
  const { search } = law;
  if (!search || !isSearching(law)) return law.state.estimate;
  const best = search.scores.reduce((a, score, i) => (score > (search.scores[a] ?? NaN) ? i : a), 0);
  return search.points[best] ?? law.state.estimate;
}
