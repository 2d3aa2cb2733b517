import type { SessionEntity } from './entities/session.entity.js';

/** How long sessions live, s. */
export interface SessionRules {
  /** Without an act of the person. */
  sessionIdleS: number;
  /** From sign-in, whatever happens. */
  sessionMaxS: number;
}

/** Requests that were on their way when a token was renewed still arrive with the one before. */
const previousTokenS = 10;
/** How long a password given again counts. */
export const elevationS = 300;

/** True where the session is over for good. */
export function isOver(
  { beganAt }: Pick<SessionEntity, 'beganAt'>,
  rules: SessionRules,
  nowMs: number,
): boolean {
  return nowMs >= Date.parse(beganAt) + rules.sessionMaxS * 1000;
}

/** True where nobody has acted for so long that signing in again is asked for. */
export function isIdle(lastSeenMs: number, rules: SessionRules, nowMs: number): boolean {
  return nowMs >= lastSeenMs + rules.sessionIdleS * 1000;
}

export function isPreviousTokenGood({ renewedAt }: Pick<SessionEntity, 'renewedAt'>, nowMs: number): boolean {
  return nowMs < Date.parse(renewedAt) + previousTokenS * 1000;
}

export function isElevated({ elevatedUntil }: Pick<SessionEntity, 'elevatedUntil'>, nowMs: number): boolean {
  return elevatedUntil !== null && nowMs < Date.parse(elevatedUntil);
}
