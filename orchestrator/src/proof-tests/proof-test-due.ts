import { isDeepStrictEqual } from 'node:util';
import type { Interlock } from '@cresthold/shared';
import type { ProofTestDueState, ProofTestOutcome } from './dto/proof-test.dto.js';

const dayMs = 86_400_000;
const soonDays = 14;

/** What a signed test says, as far as the next one's date goes. */
export interface SignedTest {
  definition: Interlock;
  outcome: ProofTestOutcome | null;
  signedAt: string | null;
}

/** When an interlock has to be tested next. Times are ms since 1970. */
export interface Due<Test extends SignedTest> {
  state: ProofTestDueState;
  lastTest: Test | null;
  dueAtMs: number;
  forbidsArmingAtMs: number;
}

/**
 * When an interlock has to be tested next. A test counts for the interlock as it was tested: one whose condition,
 * times or action changed since has to be proven again, from the day on which the change came in force. A failed
 * test forbids arming at once, without grace, until one passes.
 *
 * @param tests signed ones of this interlock, newest signature first
 * @param inForceAtMs since when this envelope is in force
 * @returns null where the envelope asks for no proof test
 */
export function proofTestDue<Test extends SignedTest>(
  interlock: Interlock,
  tests: readonly Test[],
  inForceAtMs: number,
  nowMs: number,
): Due<Test> | null {
  const { proofTestEveryDays: everyDays, proofTestGraceDays: graceDays } = interlock;
  if (everyDays === null) return null;
  const lastTest = tests.find(({ definition }) => isSameFunction(definition, interlock)) ?? null;
  const signedAtMs = Date.parse(lastTest?.signedAt ?? '');
  if (lastTest?.outcome === 'fail') {
    return { state: 'failed', lastTest, dueAtMs: signedAtMs, forbidsArmingAtMs: signedAtMs };
  }
  const dueAtMs = lastTest ? signedAtMs + everyDays * dayMs : inForceAtMs;
  const forbidsArmingAtMs = dueAtMs + graceDays * dayMs;
  return { state: stateOf(dueAtMs, forbidsArmingAtMs, nowMs), lastTest, dueAtMs, forbidsArmingAtMs };
}

export const forbidsArming = (state: ProofTestDueState): boolean => state === 'overdue' || state === 'failed';

function stateOf(dueAtMs: number, forbidsArmingAtMs: number, nowMs: number): ProofTestDueState {
  if (nowMs >= forbidsArmingAtMs) return 'overdue';
  if (nowMs >= dueAtMs) return 'due';
  return dueAtMs - nowMs <= soonDays * dayMs ? 'due-soon' : 'in-date';
}

/** Whether the test of one still speaks for the other; titles, messages and intervals do not matter. */
function isSameFunction(tested: Interlock, present: Interlock): boolean {
  return isDeepStrictEqual(functionOf(tested), functionOf(present));
}

function functionOf({ condition, delayS, clearCondition, clearDelayS, isLatching, action }: Interlock) {
  return { condition, delayS, clearCondition, clearDelayS, isLatching, action };
}
