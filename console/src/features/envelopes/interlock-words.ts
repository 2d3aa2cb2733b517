import type { Interlock } from '@cresthold/shared';
import { plainNumber } from '../../components/index.js';

/** What holds for an interlock beside its condition and action, each as one line. */
export function interlockTerms(interlock: Interlock): string[] {
  const { clearCondition, clearDelayS, isLatching, action, protects } = interlock;
  const { bypassAtMostS, proofTestEveryDays, proofTestGraceDays } = interlock;
  const after = clearDelayS > 0 ? ` for ${durationText(clearDelayS)}` : '';
  const terms = [`protects ${protects}`];
  if (clearCondition !== null) terms.push(`clears only when ${clearCondition}${after}`);
  else if (clearDelayS > 0) terms.push(`clears when it has been safe${after}`);
  if (isLatching && action !== 'trip') terms.push('latches until it is acknowledged');
  terms.push(
    bypassAtMostS === null ? 'never bypassed' : `bypassed for at most ${durationText(bypassAtMostS)}`,
  );
  if (proofTestEveryDays !== null) {
    terms.push(
      `proof test every ${plainNumber(proofTestEveryDays)} days, ${plainNumber(proofTestGraceDays)} days of grace`,
    );
  }
  return terms;
}

/**
 * A duration as people say it.
 *
 * @example
 * durationText(5400) // '1 h 30 min'
 */
export function durationText(s: number): string {
  if (s < 60) return `${plainNumber(s)} s`;
  const minutes = Math.round(s / 60);
  if (minutes < 60) return `${minutes} min`;
  return minutes % 60 === 0 ? `${minutes / 60} h` : `${Math.floor(minutes / 60)} h ${minutes % 60} min`;
}
