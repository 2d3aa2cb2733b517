import { describe, expect, it } from 'vitest';
import {
  beatHeart,
  commandTrim,
  criticalLambdaAt,
  damperRatePctPerS,
  initialBurner,
  safeTrimPct,
  sensorTimeConstantS,
  step,
  truthOf,
  type BurnerState,
} from './burner-model.js';
import { flueGasAt } from './burner-physics.js';

const still = { isDrifting: false };
const dtS = 0.01;

/** Steps with a heartbeat every `beatEveryS`; Infinity for none. */
function run(state: BurnerState, forS: number, beatEveryS: number): BurnerState {
  const every = Math.round(beatEveryS / dtS);
  for (let i = 1; i <= Math.round(forS / dtS); i += 1) {
    state = step(state, dtS, still);
    if (i % every === 0) state = beatHeart(state, (state.watchdog.beat + 1) & 0xffff);
  }
  return state;
}

const lit = () => run(initialBurner, 2, 0.25);

describe('the watchdog', () => {
  it('keeps the burner dark until a heartbeat has lived for one second', () => {
    let state = run(initialBurner, 10, Infinity);
    expect(state).toMatchObject({ isFlameOn: false, damperPct: safeTrimPct, watchdog: { count: 0 } });
    state = beatHeart(state, 1);
    state = run(state, 0.99, 0.33);
    expect(state.isFlameOn).toBe(false);
    state = run(state, 0.01, Infinity);
    expect(step(beatHeart(state, 99), dtS, still).isFlameOn).toBe(true);
  });

  it('acts exactly two seconds after the last change', () => {
    const beaten = beatHeart(commandTrim(lit(), 40), 500);
    const before = run(beaten, 1.99, Infinity);
    expect(before).toMatchObject({ isFlameOn: true, watchdog: { isTripped: false } });
    const after = step(before, dtS, still);
    expect(after).toMatchObject({ isFlameOn: false, commandPct: safeTrimPct });
    expect(after.watchdog).toMatchObject({ isTripped: true, count: 1 });
  });

  it('takes the same value written again for no life sign', () => {
    let state = beatHeart(lit(), 500);
    for (let i = 0; i < 200; i += 1) state = beatHeart(step(state, dtS, still), 500);
    expect(state.watchdog.isTripped).toBe(true);
  });

  it('sends the damper to its safe position and keeps it there against commands', () => {
    let state = run(commandTrim(lit(), 40), 5, 0.25);
    expect(state.damperPct).toBeCloseTo(40, 9);
    state = run(state, 2, Infinity);
    state = run(commandTrim(state, 30), 10, Infinity);
    expect(state.damperPct).toBeCloseTo(safeTrimPct, 9);
  });

  it('stays where it is when it clears: it moves only by a new command', () => {
    const dark = run(commandTrim(lit(), 40), 20, Infinity);
    const relit = run(dark, 3, 0.25);
    expect(relit).toMatchObject({ isFlameOn: true, commandPct: safeTrimPct, damperPct: safeTrimPct });
    expect(relit.watchdog).toMatchObject({ isTripped: false, count: 1 });
  });

  it('does not clear on a heartbeat that stops and starts again', () => {
    let state = run(lit(), 3, Infinity);
    state = beatHeart(state, 700);
    state = run(state, 2.5, Infinity);
    state = beatHeart(state, 701);
    expect(state.watchdog.isTripped).toBe(true);
  });
});

describe('the measured values', () => {
  it('have gone 1 − 1/e of their way after one time constant', () => {
    const from = { ...lit(), measured: { o2Pct: 0, coPpm: 0, flueTempC: 0 } };
    const goal = flueGasAt(from.damperPct, criticalLambdaAt(0, still));
    const after = run(from, sensorTimeConstantS, 0.25).measured;
    expect(after.o2Pct / goal.o2Pct).toBeCloseTo(1 - 1 / Math.E, 9);
    expect(after.flueTempC / goal.flueTempC).toBeCloseTo(1 - 1 / Math.E, 9);
  });

  it('do not depend on the size of the step while the damper stands', () => {
    const from = { ...lit(), measured: { o2Pct: 0, coPpm: 0, flueTempC: 0 } };
    const coarse = step(from, 0.5, still).measured.o2Pct;
    expect(run(from, 0.5, 0.25).measured.o2Pct).toBeCloseTo(coarse, 9);
  });
});

describe('the damper', () => {
  it('moves no faster than its drive', () => {
    const state = step(commandTrim(lit(), 0), 1, still);
    expect(state.damperPct).toBeCloseTo(safeTrimPct - damperRatePctPerS, 9);
  });
});

describe('the drift', () => {
  it('swings the critical ratio by 0.02 within twenty minutes', () => {
    const at = (tS: number) => criticalLambdaAt(tS, { isDrifting: true });
    expect(at(0)).toBeCloseTo(1.1, 12);
    expect(at(300)).toBeCloseTo(1.12, 12);
    expect(at(900)).toBeCloseTo(1.08, 12);
    expect(criticalLambdaAt(300, still)).toBe(1.1);
  });

  it('moves the true best', () => {
    const bestAt = (tS: number) => truthOf({ ...lit(), tS }, { isDrifting: true }).best.trimPct;
    expect(bestAt(300) - bestAt(900)).toBeCloseTo(4, 0);
  });
});
