import type { JudgedInterlock } from '../envelopes/judged-interlock.js';
import { motionOf } from '../envelopes/rig-moves.js';
import { DomainError } from '../errors/domain-error.js';
import type { EngineState } from './engine-state.js';
import { isoTime } from './wall-time.js';

/** Longest time for which a proof test may take a condition as true, s. */
const forceAtMostS = 600;

/**
 * Lets an interlock not act for a time. It is judged and shown all the same, and acts at once at the end where its
 * condition still holds.
 *
 * @param forS duration, s
 * @param tS time of the last scan, s
 * @throws interlock.not-found, interlock.no-bypass where the envelope does not allow it
 * @throws request.invalid where the reason is missing or the time is too long
 */
export function bypassInterlock(
  engine: EngineState,
  order: { interlock: string; forS: number; by: string; reason: string },
): void {
  const judged = required(engine, order.interlock);
  const { bypassAtMostS } = judged.interlock;
  if (bypassAtMostS === null) throw new DomainError('interlock.no-bypass');
  const details = [];
  if (order.reason.trim() === '') details.push({ field: 'reason', message: 'Say why it is bypassed.' });
  if (!(order.forS > 0 && order.forS <= bypassAtMostS)) {
    details.push({ field: 'forS', message: `The envelope allows at most ${bypassAtMostS} s: give less.` });
  }
  if (details.length > 0) throw new DomainError('request.invalid', undefined, details);
  const untilAt = isoTime(engine.lastScanAtMs + 1000 * order.forS);
  judged.bypassUntil(engine.lastScanS + order.forS, { by: order.by, reason: order.reason, untilAt });
  engine.log.add({ type: 'interlock.bypassed', ...order });
  engine.isStatusChanged = true;
}

/** @throws interlock.not-found, interlock.not-bypassed */
export function endBypass(engine: EngineState, interlock: string, by: string): void {
  const judged = required(engine, interlock);
  if (!judged.isBypassedAt(engine.lastScanS)) throw new DomainError('interlock.not-bypassed');
  judged.endBypass();
  engine.log.add({ type: 'interlock.bypass-ended', interlock, by });
  engine.isStatusChanged = true;
}

/** @throws interlock.not-found, interlock.not-latched while its condition holds or it has not acted */
export function acknowledgeInterlock(engine: EngineState, interlock: string, by: string): void {
  if (!required(engine, interlock).acknowledge()) throw new DomainError('interlock.not-latched');
  engine.log.add({ type: 'interlock.acknowledged', interlock, by });
  engine.isStatusChanged = true;
}

/**
 * Takes the condition of an interlock as true, for its proof test: what follows is what would follow on the rig.
 *
 * @throws interlock.not-found
 * @throws rig.not-armed in a phase in which nothing would follow; rig.busy while a run is open
 * @throws request.invalid where `forS` is not above 0 and at most 600
 */
export function forceInterlock(
  engine: EngineState,
  order: { interlock: string; forS: number; by: string },
): void {
  const { interlock, forS, by } = order;
  const judged = required(engine, interlock);
  if (engine.run) throw new DomainError('rig.busy');
  if (motionOf[engine.rigState.phase] !== 'commands') throw new DomainError('rig.not-armed');
  if (!(forS > 0 && forS <= forceAtMostS)) {
    const message = `Give a time above 0 and at most ${forceAtMostS} s.`;
    throw new DomainError('request.invalid', undefined, [{ field: 'forS', message }]);
  }
  judged.endBypass();
  judged.forceUntil(engine.lastScanS + forS);
  engine.log.add({ type: 'interlock.forced', interlock, by });
  engine.isStatusChanged = true;
}

function required(engine: EngineState, id: string): JudgedInterlock {
  const judged = engine.fitted?.interlocks.find(id) ?? null;
  if (judged === null) {
    throw new DomainError('interlock.not-found', `The envelope in force has no interlock "${id}".`);
  }
  return judged;
}

/** A run's record says which interlocks were bypassed when it began. */
export function noteBypasses({ fitted, lastScanS, log }: EngineState): void {
  fitted?.interlocks.forEachBypassed(({ interlock, bypassEndS }, { by, reason }) => {
    log.add({
      type: 'interlock.bypassed',
      interlock: interlock.id,
      by,
      reason,
      forS: bypassEndS - lastScanS,
    });
  });
}
