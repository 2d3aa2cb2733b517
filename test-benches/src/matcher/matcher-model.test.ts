import { describe, expect, it } from 'vitest';
import { MatcherModel, restTuning } from './matcher-model.js';
import { generator } from './match-generator.js';
import { motorStepPct } from './motor-drive.js';

/** A matcher with a living host; its own steps are 0.01 s. */
class Attended {
  readonly model: MatcherModel;
  private beats = 0;

  constructor(overrides: Partial<ConstructorParameters<typeof MatcherModel>[0]> = {}) {
    this.model = new MatcherModel({ seed: 1, isNoisy: false, isDrifting: false, ...overrides });
    this.go(3);
  }

  go(forS: number): this {
    const fromS = this.model.tS;
    for (let i = 1; i <= Math.round(forS * 10); i += 1) {
      this.model.write('heartbeat', (this.beats += 1) & 0xffff);
      this.model.advanceTo(fromS + i / 10);
    }
    return this;
  }

  /** Commands both capacitors a little at a time, as an envelope's slew limit has it. */
  moveSlowly(shunt: number, series: number): this {
    const { at } = this.model.truth;
    const [fromShunt, fromSeries] = [at['shunt'] ?? NaN, at['series'] ?? NaN];
    for (let i = 1; i <= 100; i += 1) {
      this.model.write('shunt', fromShunt + ((shunt - fromShunt) * i) / 100);
      this.model.write('series', fromSeries + ((series - fromSeries) * i) / 100);
      this.go(0.5);
    }
    return this.go(3);
  }

  moveToBest(): this {
    const { best } = this.model.truth;
    return this.moveSlowly(best['shunt'] ?? NaN, best['series'] ?? NaN);
  }
}

describe('the matcher', () => {
  it('delivers all that the generator gives at its best tuning, to the step of its motors', () => {
    const { model } = new Attended().moveToBest();
    const { at, best, loss } = model.truth;
    expect(Math.abs((at['series'] ?? NaN) - (best['series'] ?? NaN))).toBeLessThanOrEqual(
      motorStepPct / 2 + 1e-9,
    );
    expect(loss).toBeLessThan(1);
    expect(model.read('forward')).toBeCloseTo(generator.setW, -0.5);
    expect(model.read('reflected')).toBeLessThan(1);
    expect([model.read('rfOn'), model.read('foldback'), model.read('generatorTrip')]).toEqual([1, 0, 0]);
  });

  it('folds back to its limit of reflected power where it is far off, and does not trip', () => {
    const { model } = new Attended().go(10);
    expect(model.read('reflected')).toBeCloseTo(generator.foldbackW, 0);
    expect(model.read('forward')).toBeLessThan(0.5 * generator.setW);
    expect([model.read('rfOn'), model.read('foldback')]).toEqual([1, 1]);
  });

  it('trips where it is thrown off its match faster than it can fold back, and waits for its reset', () => {
    const attended = new Attended().moveToBest();
    const { model } = attended;
    model.write('series', 80);
    attended.go(5);
    expect([model.read('rfOn'), model.read('generatorTrip')]).toEqual([0, 1]);
    expect(model.truth.loss).toBeNull();
    expect(model.read('gammaMagnitude')).toBeNaN();
    attended.go(20);
    expect(model.read('generatorTrip')).toBe(1);
    model.write('generatorReset', 1);
    attended.go(5);
    expect([model.read('rfOn'), model.read('generatorTrip'), model.read('generatorReset')]).toEqual([
      1, 0, 0,
    ]);
  });

  it('takes nothing beyond the travel of its capacitors', () => {
    const { model } = new Attended();
    expect([model.write('shunt', 100.5), model.write('series', -1), model.write('forward', 1)]).toEqual([
      false,
      false,
      false,
    ]);
  });

  it('goes dark and to its rest tuning when the heartbeat stops', () => {
    const { model } = new Attended().moveToBest();
    model.advanceTo(model.tS + 12);
    expect(model.watchdog).toMatchObject({ isTripped: true, count: 1 });
    expect(model.truth.at).toEqual({ shunt: restTuning.shuntPct, series: restTuning.seriesPct });
    expect([model.read('rfOn'), model.read('shunt')]).toEqual([0, restTuning.shuntPct]);
    expect(model.read('forward')).toBeCloseTo(0, 9);
  });

  it('wanders as its seed says: a match that was made costs more than a tenth within twenty minutes', () => {
    const attended = new Attended({ isDrifting: true, seed: 4 }).moveToBest();
    const first = attended.model.truth.best;
    expect(attended.model.truth.loss).toBeLessThan(20);
    const losses = Array.from({ length: 24 }, () => attended.go(50).model.truth.loss ?? 0);
    expect(attended.model.truth.best).not.toEqual(first);
    expect(Math.max(...losses)).toBeGreaterThan(0.1 * generator.setW);
    expect(new MatcherModel({ seed: 5, isNoisy: false, isDrifting: true }).truth.best).not.toEqual(
      new MatcherModel({ seed: 4, isNoisy: false, isDrifting: true }).truth.best,
    );
  });
});
