import { describe, expect, it } from 'vitest';
import type { DomainError } from '../errors/domain-error.js';
import { climber, untilEnded } from './climber.fixture.js';
import { type FakePlant, written } from './fake-plant.fixture.js';

describe('the record of a tripped run', () => {
  const trip = (plant: FakePlant) => plant.engine.emergencyStop('t', 'smoke', 0);

  it('shows every actuator at rest in its last row, on the way there in those before', () => {
    const plant = climber();
    const names = plant.columns;
    trip(plant);
    const rows: (number | undefined)[][] = [];
    for (let output = plant.scan(); ; output = plant.scan()) {
      rows.push(['valve', 'valve.applied'].map((name) => output.row?.[names.indexOf(name)]));
      if (output.runEnded) break;
    }
    expect(rows).toEqual([
      [25, 24],
      [24, 23],
      [23, 22],
      [22, 21],
      [21, 20],
      [20, NaN],
    ]);
  });

  it('does not wait for an actuator whose wire is lost, but for the others', () => {
    const plant = climber();
    plant.lost = ['aux'];
    const output = untilEnded(plant);
    expect(plant.at.valve).toBe(20);
    expect(output.runEnded).toMatchObject({ status: 'tripped', reason: '"aux" is gone.' });
    const cut = climber();
    cut.lost = ['main', 'aux'];
    expect(cut.scan().runEnded).toMatchObject({ status: 'tripped' });
  });

  it('ends in time where an actuator does not come to rest, which goes on being stopped', () => {
    const plant = climber();
    plant.stuck.add('valve');
    trip(plant);
    const begunS = plant.tS;
    untilEnded(plant);
    /** One scan to 24; from there 4 at 10 a second, twice that, the read-back within 1 s, and 1 s beside. */
    expect(plant.tS - begunS).toBeCloseTo(0.1 + 0.8 + 1 + 1, 6);
    expect(written(plant.scan(), 'valve')).toBe(20);
    expect(plant.engine.isAtRest()).toBe(false);
    plant.stuck.clear();
    plant.scans(3);
    expect(plant.engine.isAtRest()).toBe(true);
  });

  it('is not held open longer by a wire that comes and goes', () => {
    const plant = climber();
    plant.stuck.add('valve');
    plant.bad.add('fan');
    trip(plant);
    const begunS = plant.tS;
    for (let ended = null; !ended && plant.tS - begunS < 10; ended = plant.scan().runEnded) {
      plant.lost = plant.lost.length > 0 ? [] : ['aux'];
    }
    expect(plant.tS - begunS).toBeLessThan(3);
  });

  it('holds a reset off until it has ended, and lists what else happens meanwhile behind the cause', () => {
    const plant = climber();
    trip(plant);
    plant.scan();
    plant.latenessS = 0.11;
    plant.scans(3);
    plant.latenessS = 0;
    const { trip: latched, runId } = plant.engine.status();
    expect(latched?.cause).toBe('emergency-stop');
    expect(latched?.later.map(({ cause }) => cause)).toEqual(['overrun']);
    expect(runId).toBe('run-1');
    expect(() => plant.engine.reset('officer', 'all well')).toThrow(/still there/);
    expect(untilEnded(plant).runEnded).toMatchObject({ status: 'tripped', reason: 'smoke' });
    plant.engine.reset('officer', 'all well');
    expect(plant.phase).toBe('idle');
  });

  it('names the run and the stop action as what holds a reset off', () => {
    const plant = climber();
    plant.engine.trip('host-fault', 'A bug.', 0);
    const fields = () => {
      try {
        plant.engine.reset('officer', 'all well');
      } catch (error) {
        return (error as DomainError).details.map(({ field }) => field);
      }
      return [];
    };
    expect(fields()).toEqual(['run', 'stop-action']);
    untilEnded(plant);
    expect(fields()).toEqual([]);
  });
});
