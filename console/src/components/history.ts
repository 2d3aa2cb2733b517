/** Undo and redo over immutable values. */
export interface History<T> {
  readonly past: readonly T[];
  readonly present: T;
  readonly future: readonly T[];
}

const keptSteps = 200;

export function beginHistory<T>(present: T): History<T> {
  return { past: [], present, future: [] };
}

/** A new value; what was undone before it is gone. The same value again is no step. */
export function record<T>(history: History<T>, value: T): History<T> {
  if (Object.is(value, history.present)) return history;
  return { past: [...history.past, history.present].slice(-keptSteps), present: value, future: [] };
}

export function undo<T>(history: History<T>): History<T> {
  const previous = history.past.at(-1);
  if (history.past.length === 0 || previous === undefined) return history;
  return {
    past: history.past.slice(0, -1),
    present: previous,
    future: [history.present, ...history.future],
  };
}

export function redo<T>(history: History<T>): History<T> {
  const [next, ...rest] = history.future;
  if (history.future.length === 0 || next === undefined) return history;
  return { past: [...history.past, history.present], present: next, future: rest };
}
