import fc from 'fast-check';
import { DomainError } from '../errors/domain-error.js';
import { FakePlant, written } from './fake-plant.fixture.js';

const slewPerS = 10;

/** Presses, renewals and releases that come when they like, between scans that come when they can. */
export const heldMoveCases = fc.record({
  forS: fc.constantFrom(0.1, 0.35, 1, 2),
  gridStep: fc.constantFrom(0, 0, 0.1, 2.5),
  happenings: fc.array(
    fc.record({
      /** What the page does between two scans; a press and its renewal are the same request. */
      act: fc.constantFrom('none', 'none', 'none', 'renew', 'renew', 'press', 'release', 'stale-renewal'),
      value: fc.double({ min: 0, max: 100, noNaN: true }),
      /** Time to the next scan, s; now and then the loop was blocked. */
      dtS: fc.constantFrom(0.1, 0.1, 0.1, 0.05, 0.13, 0.4, 3),
      /** When in that time the act comes. */
      share: fc.double({ min: 0, max: 1, noNaN: true }),
    }),
    { minLength: 10, maxLength: 80 },
  ),
});
export type HeldMoveCase = typeof heldMoveCases extends fc.Arbitrary<infer T> ? T : never;

/** One write of the valve beside the one before. */
export interface JudgedWrite {
  atS: number;
  /** When a press or renewal was taken last, s; -Infinity after a release. */
  lastRenewalS: number;
  change: number;
  /** How far the slew limit allows since the write before, with what a grid may owe. */
  reach: number;
}

/** Lives a case and judges by the writes alone. */
export function* liveHeldMoves({ forS, gridStep, happenings }: HeldMoveCase): Generator<JudgedWrite> {
  const grids = new Map(gridStep > 0 ? [['valve', { step: gridStep, origin: 0 }]] : []);
  const plant = new FakePlant({ grids }).arm();
  let before = written(plant.scan(), 'valve') ?? NaN;
  let presses = 1;
  let heldId = '';
  let lastRenewalS = -Infinity;
  for (const { act, value, dtS, share } of happenings) {
    const commandS = plant.tS + share * dtS;
    if (act === 'press') presses++;
    const id = `press ${act === 'stale-renewal' ? presses - 1 : presses}`;
    if (act === 'release') {
      plant.engine.releaseMove('valve', id);
      if (heldId === id) lastRenewalS = -Infinity;
    } else if (act !== 'none' && isTaken(() => plant.engine.move('valve', value, 't', { id, forS }))) {
      heldId = id;
      lastRenewalS = commandS;
    }
    const after = written(plant.scan({ dtS }), 'valve') ?? NaN;
    yield { atS: plant.tS, lastRenewalS, change: after - before, reach: slewPerS * dtS + gridStep + 1e-9 };
    before = after;
  }
}

function isTaken(command: () => void): boolean {
  try {
    command();
    return true;
  } catch (error) {
    if (error instanceof DomainError && error.code.startsWith('move.')) return false;
    throw error;
  }
}
