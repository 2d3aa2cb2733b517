import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../errors/domain-error.js';
import { eventTypes, FakePlant, plantEnvelope, plantOrder, written } from './fake-plant.fixture.js';
import { heldMoveCases, liveHeldMoves } from './held-move.fixture.js';

const codeOf = (act: () => void): string => {
  try {
    act();
    return 'none';
  } catch (error) {
    return error instanceof DomainError ? error.code : String(error);
  }
};

const hold = (id: string, forS = 0.5) => ({ id, forS });

describe('a held move', () => {
  it('goes on while it is renewed, and stops where it is when it no longer is', () => {
    const plant = new FakePlant().arm();
    plant.scan();
    expect(plant.engine.move('valve', 90, 'technician', hold('press'))).toEqual({ isRenewal: false });
    const moving = plant.scans(3).map((output) => written(output, 'valve'));
    expect(moving).toEqual([21, 22, 23]);
    expect(plant.engine.status().heldMoves).toEqual([{ channel: 'valve', value: 90, by: 'technician' }]);
    expect(plant.engine.move('valve', 90, 'technician', hold('press'))).toEqual({ isRenewal: true });
    const outputs = plant.scans(12);
    // Renewed for 0.5 s at a scan of 0.1 s: the fifth scan finds it over.
    expect(outputs.map((output) => written(output, 'valve'))).toEqual([24, 25, 26, 27, ...Array(8).fill(27)]);
    expect(outputs.flatMap(eventTypes)).toContain('move.hold-timed-out');
    expect(plant.engine.status().heldMoves).toEqual([]);
    expect(plant.phase).toBe('armed');
  });

  it('stops at once when it is released', () => {
    const plant = new FakePlant().arm();
    plant.scan();
    plant.engine.move('valve', 90, 'technician', hold('press', 2));
    plant.scans(2);
    plant.engine.releaseMove('valve', 'press');
    expect(plant.scans(3).map((output) => written(output, 'valve'))).toEqual([22, 22, 22]);
  });

  it('cannot be renewed once it is over, nor begin after its own release', () => {
    const plant = new FakePlant().arm();
    plant.scan();
    plant.engine.move('valve', 90, 'technician', hold('first', 0.2));
    plant.scans(4);
    expect(codeOf(() => plant.engine.move('valve', 90, 'technician', hold('first')))).toBe('move.hold-ended');
    plant.engine.releaseMove('valve', 'overtaken');
    expect(codeOf(() => plant.engine.move('valve', 90, 't', hold('overtaken')))).toBe('move.hold-ended');
    expect(plant.scans(2).map((output) => written(output, 'valve'))).toEqual([21, 21]);
  });

  it('is nobody else’s to move, with a hold or without', () => {
    const plant = new FakePlant().arm();
    plant.scan();
    plant.engine.move('valve', 90, 'technician', hold('mine'));
    expect(codeOf(() => plant.engine.move('valve', 10, 'engineer', hold('other')))).toBe(
      'move.held-by-another',
    );
    expect(codeOf(() => plant.engine.move('valve', 10, 'script'))).toBe('move.held-by-another');
    plant.engine.move('fan', 10, 'engineer', hold('other'));
    expect(plant.engine.status().heldMoves).toHaveLength(2);
  });

  it('ends with disarming, a trip and the start of a run, and cannot go on after them', () => {
    for (const end of ['disarm', 'trip', 'run'] as const) {
      const plant = new FakePlant().arm();
      plant.scan();
      plant.engine.move('valve', 90, 'technician', hold('press', 2));
      if (end === 'disarm') plant.engine.disarm('technician');
      if (end === 'trip') plant.engine.emergencyStop('technician', '', 0);
      if (end === 'run') plant.engine.startRun(plantOrder);
      expect(plant.engine.status().heldMoves).toEqual([]);
      const answer = codeOf(() => plant.engine.move('valve', 90, 'technician', hold('press', 2)));
      expect(answer).toBe(end === 'trip' ? 'rig.tripped' : 'rig.busy');
    }
  });

  it('stops on the grid of its wire without a way back', () => {
    const grids = new Map([['valve', { step: 2.5, origin: 0 }]]);
    const plant = new FakePlant({ grids, envelope: plantEnvelope() }).arm();
    plant.scan();
    plant.engine.move('valve', 90, 'technician', hold('press', 0.6));
    const values = plant.scans(20).map((output) => written(output, 'valve'));
    expect(new Set(values.slice(5)).size).toBe(1);
    expect(values.at(-1)).toBeGreaterThan(20);
  });
});

it('writes no motion later than the timeout after the last renewal, whatever happens', () => {
  let moved = 0;
  let held = 0;
  fc.assert(
    fc.property(heldMoveCases, (heldMoveCase) => {
      for (const { atS, lastRenewalS, change, reach } of liveHeldMoves(heldMoveCase)) {
        // A point of the grid may come out a rounding apart: the wire carries the same number.
        if (Math.abs(change) < 1e-9) {
          held++;
          continue;
        }
        moved++;
        if (!(atS - lastRenewalS < heldMoveCase.forS)) throw new Error(`Moved ${atS - lastRenewalS} s late.`);
        if (Math.abs(change) > reach) throw new Error(`Jumped by ${change}.`);
      }
    }),
    { numRuns: 300 },
  );
  expect(moved).toBeGreaterThan(1000);
  expect(held).toBeGreaterThan(1000);
});
