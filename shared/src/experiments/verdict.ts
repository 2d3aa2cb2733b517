import type { Verdict } from '../runs/run-event.schema.js';

/** What the checks of a run have decided; null where one could not be decided. */
export type CheckDecisions = readonly (boolean | null)[];

/** Any check not met is a fail; one that could not be decided, or none at all, proves nothing. */
export function verdictOf(decisions: CheckDecisions): Verdict {
  if (decisions.includes(false)) return 'fail';
  return decisions.length === 0 || decisions.includes(null) ? 'inconclusive' : 'pass';
}

export function verdictReason(decisions: CheckDecisions): string {
  if (decisions.length === 0) return 'The experiment came to its end without a check.';
  const met = decisions.filter((isMet) => isMet === true).length;
  const open = decisions.filter((isMet) => isMet === null).length;
  const undecided = open > 0 ? `, ${open} could not be decided` : '';
  return `The experiment came to its end: ${met} of ${decisions.length} checks met${undecided}.`;
}
