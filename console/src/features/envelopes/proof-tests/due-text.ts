import type { ProofTestDue } from '../../../api/index.js';
import { formatMoment } from '../../../components/index.js';

const day = (iso: string): string => formatMoment(iso).slice(0, 10);

/** How an interlock stands with its proof test, in words. */
export function dueText({ state, dueAt, forbidsArmingAt, lastTest }: ProofTestDue): string {
  switch (state) {
    case 'in-date':
      return `in date, due ${day(dueAt)}`;
    case 'due-soon':
      return `due soon, ${day(dueAt)}`;
    case 'due':
      return `${lastTest ? 'due' : 'never tested'}; forbids arming from ${formatMoment(forbidsArmingAt)}`;
    case 'overdue':
      return lastTest ? `overdue since ${day(dueAt)}: forbids arming` : 'never tested: forbids arming';
    case 'failed':
      return 'failed: forbids arming';
  }
}

export const forbidsArming = ({ state }: ProofTestDue): boolean => state === 'overdue' || state === 'failed';

/** What a person should see before it comes to that. */
export const isPressing = ({ state }: ProofTestDue): boolean => state !== 'in-date';
