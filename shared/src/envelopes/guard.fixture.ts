import fc from 'fast-check';
import { type ActuatorLimit, actuatorLimitSchema } from './envelope.schema.js';
import type { GuardedActuator } from './guard.js';
import { createGuardedActuator, takeOver } from './guard.js';

export const guardPeriodS = 0.05;

export function testLimit(change: Partial<ActuatorLimit> = {}): ActuatorLimit {
  return actuatorLimitSchema.parse({
    channel: 'valve',
    min: 0,
    max: 100,
    slewPerS: 10,
    ditherAmplitudeMax: 5,
    rest: 20,
    stopCategory: 1,
    readBackTolerance: 1,
    ...change,
  });
}

export interface GuardCase {
  limit: ActuatorLimit;
  grid: { step: number; origin: number };
}

/** Envelope limits of every size, on continuous wires and on grids that need not fit the range. */
export const guardCases: fc.Arbitrary<GuardCase> = fc
  .record({
    min: fc.double({ min: -1000, max: 1000, noNaN: true }),
    span: fc.double({ min: 0.1, max: 2000, noNaN: true }),
    slewPerS: fc.double({ min: 0.001, max: 10_000, noNaN: true }),
    amplitudeShare: fc.double({ min: 0, max: 0.5, noNaN: true }),
    restShare: fc.double({ min: 0, max: 1, noNaN: true }),
    step: fc.oneof(
      fc.constant(0),
      fc.constantFrom(0.01, 0.1, 0.25, 1),
      fc.double({ min: 0.001, max: 3, noNaN: true }),
    ),
    origin: fc.double({ min: -2, max: 2, noNaN: true }),
  })
  .map(({ min, span, slewPerS, amplitudeShare, restShare, step, origin }) => {
    const max = min + span;
    const rest = Math.min(max, min + span * restShare);
    const ditherAmplitudeMax = Math.min(span * amplitudeShare, (max - min) / 2);
    return {
      limit: testLimit({ min, max, slewPerS, ditherAmplitudeMax, rest }),
      grid: { step, origin },
    };
  });

/** What a step, a person or a bug may ask for, and the time that passed meanwhile. */
export const guardRequests = fc.record({
  base: fc.oneof(
    { weight: 6, arbitrary: fc.double({ min: -3000, max: 3000, noNaN: true }) },
    { weight: 1, arbitrary: fc.double() },
  ),
  dither: fc.oneof(
    { weight: 6, arbitrary: fc.double({ min: -50, max: 50, noNaN: true }) },
    { weight: 1, arbitrary: fc.double() },
  ),
  dtS: fc.oneof(
    { weight: 6, arbitrary: fc.double({ min: 0.001, max: 0.2, noNaN: true }) },
    { weight: 1, arbitrary: fc.constantFrom(0, -1, NaN, Infinity, 3600) },
  ),
});

/** @param share where in the range the actuator is taken over, 0 to 1 */
export function guardedAt({ limit, grid }: GuardCase, share: number): GuardedActuator {
  const guarded = createGuardedActuator(limit, grid, guardPeriodS);
  takeOver(guarded, Math.min(limit.max, limit.min + (limit.max - limit.min) * share));
  return guarded;
}

/** Room for the rounding of double numbers of this size. */
export function roundingOf(...values: number[]): number {
  return Math.max(1, ...values.map(Math.abs)) * 1e-12;
}
