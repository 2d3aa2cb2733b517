import { describe, expect, it } from 'vitest';
import { compileExpression } from '../expressions/compile-expression.js';
import type { CompiledExpression } from '../expressions/expression.types.js';
import { Quality } from '../rigs/quality.js';
import { Readings } from '../scan/readings.js';
import { type Interlock, interlockSchema } from './envelope.schema.js';
import { InterlockJudge } from './interlock-judge.js';
import { StalenessJudge } from './staleness-judge.js';

function compiled(text: string): CompiledExpression {
  const outcome = compileExpression(text, new Set(['temp', 'co']));
  if (!outcome.isOk) throw new Error(outcome.message);
  return outcome.expression;
}

const readings = new Readings(['temp', 'co']);

function judgeOf(...interlocks: Partial<Interlock>[]): InterlockJudge {
  const whole = interlocks.map((change, index) =>
    interlockSchema.parse({
      id: `lock-${index}`,
      title: 'Lock',
      condition: 'temp > 90',
      delayS: 0,
      action: 'trip',
      message: 'Look.',
      ...change,
    }),
  );
  return new InterlockJudge(
    whole,
    whole.map(({ condition, clearCondition }) => ({
      condition: compiled(condition),
      clearCondition: clearCondition === null ? null : compiled(clearCondition),
    })),
    readings,
  );
}

/** Judges a scan in which the sensors show this. */
function judgeScan(judge: InterlockJudge, tS: number, temp: number, co = 0): void {
  readings.set(0, temp, Quality.good);
  readings.set(1, co, Quality.good);
  judge.judge(tS);
}
const actedIds = ({ acted }: InterlockJudge) => acted.map(({ id }) => id);

describe('an interlock', () => {
  it('acts in the first scan without a delay, and once per episode', () => {
    const judge = judgeOf({});
    const acted = [80, 91, 92, 89, 95].map((temp, i) => {
      judgeScan(judge, i, temp);
      return judge.acted.length;
    });
    expect(acted).toEqual([0, 1, 0, 0, 1]);
  });

  it('acts exactly when its condition has held for the delay', () => {
    const judge = judgeOf({ delayS: 0.3 });
    const states = Array.from({ length: 5 }, (_, i) => {
      judgeScan(judge, 7 + i * 0.1, 95);
      return judge.stateOf('lock-0');
    });
    expect(states).toEqual(['pending', 'pending', 'pending', 'acted', 'acted']);
  });

  it('does not act a scan too early', () => {
    const judge = judgeOf({ delayS: 0.3 });
    for (const tS of [0, 0.1, 0.2, 0.299]) judgeScan(judge, tS, 95);
    expect(judge.stateOf('lock-0')).toBe('pending');
    judgeScan(judge, 0.3, 95);
    expect(judge.stateOf('lock-0')).toBe('acted');
  });

  it('begins its delay anew after the condition was false for one scan', () => {
    const judge = judgeOf({ delayS: 0.3 });
    for (const [i, temp] of [95, 95, 95, 80, 95, 95, 95].entries()) judgeScan(judge, i * 0.1, temp);
    expect(judge.stateOf('lock-0')).toBe('pending');
  });

  it('counts an input that is not a number as violated, whatever side the condition would be on', () => {
    for (const condition of ['temp > 90', 'temp < 90', 'not (temp > 90)', 'temp > 90 or co < 5']) {
      const judge = judgeOf({ condition });
      judgeScan(judge, 0, NaN);
      expect(judge.stateOf('lock-0')).toBe('acted');
    }
  });

  it('says once that it became clear after it had acted, and nothing of one that was only pending', () => {
    const judge = judgeOf({ delayS: 0 }, { delayS: 10 });
    judgeScan(judge, 0, 95);
    judgeScan(judge, 0.1, 80);
    expect(judge.cleared.map(({ id }) => id)).toEqual(['lock-0']);
    judgeScan(judge, 0.2, 80);
    expect(judge.cleared).toEqual([]);
  });

  it('puts first what came due first, where several act in one scan', () => {
    const judge = judgeOf(
      { delayS: 0.25, condition: 'co > 5' },
      { delayS: 0.2, condition: 'temp > 90' },
      { delayS: 0.28, condition: 'temp > 91' },
    );
    for (const tS of [0, 0.1, 0.2 - 0.001, 0.3]) judgeScan(judge, tS, 95, 9);
    expect(actedIds(judge)).toEqual(['lock-1', 'lock-0', 'lock-2']);
  });

  it('keeps the order of the envelope where they came due together', () => {
    const judge = judgeOf({ condition: 'co > 5' }, { condition: 'temp > 90' });
    judgeScan(judge, 0, 95, 9);
    expect(actedIds(judge)).toEqual(['lock-0', 'lock-1']);
  });

  it('tells whether any state has changed, and whether it has judged at all', () => {
    const judge = judgeOf({});
    expect(judge.hasJudged).toBe(false);
    judgeScan(judge, 0, 80);
    expect([judge.hasJudged, judge.hasChanged]).toEqual([true, false]);
    judgeScan(judge, 1, 95);
    expect(judge.hasChanged).toBe(true);
  });
});

describe('an interlock with hysteresis', () => {
  const walk = (judge: InterlockJudge, temps: number[]) =>
    temps.map((temp, i) => {
      judgeScan(judge, i * 0.1, temp);
      return judge.stateOf('lock-0');
    });

  it('clears only on the far side of its clear condition', () => {
    const judge = judgeOf({ clearCondition: 'temp < 80' });
    expect(walk(judge, [95, 85, 91, 79])).toEqual(['acted', 'acted', 'acted', 'clear']);
  });

  it('does not clear on an input that is not known, even where its condition is false', () => {
    const judge = judgeOf({ clearCondition: 'co < 1' });
    judgeScan(judge, 0, 95);
    judgeScan(judge, 0.1, 70, NaN);
    expect(judge.stateOf('lock-0')).toBe('acted');
    judgeScan(judge, 0.2, 70, 0);
    expect(judge.stateOf('lock-0')).toBe('clear');
  });

  it('clears after it has been safe for its clear delay without a break', () => {
    const judge = judgeOf({ clearDelayS: 0.2 });
    const states = walk(judge, [95, 70, 70, 95, 70, 70, 70]);
    expect(states.map((state) => state === 'clear')).toEqual([
      false,
      false,
      false,
      false,
      false,
      false,
      true,
    ]);
  });

  it('that never acted needs no clear condition', () => {
    const judge = judgeOf({ delayS: 10, clearCondition: 'temp < 80' });
    expect(walk(judge, [95, 85])).toEqual(['pending', 'clear']);
  });
});

describe('a latching interlock', () => {
  it('waits to be acknowledged, and can be only once its condition is false', () => {
    const judge = judgeOf({ isLatching: true });
    judgeScan(judge, 0, 95);
    expect(judge.find('lock-0')?.acknowledge()).toBe(false);
    judgeScan(judge, 0.1, 70);
    expect([judge.stateOf('lock-0'), judge.firstActed('trip')?.id]).toEqual(['latched', 'lock-0']);
    expect(judge.find('lock-0')?.acknowledge()).toBe(true);
    judgeScan(judge, 0.2, 70);
    expect(judge.stateOf('lock-0')).toBe('clear');
  });

  it('acts anew where its condition comes back while it is latched', () => {
    const judge = judgeOf({ isLatching: true, delayS: 0 });
    for (const [i, temp] of [95, 70].entries()) judgeScan(judge, i * 0.1, temp);
    judgeScan(judge, 0.2, 95);
    expect([judge.stateOf('lock-0'), actedIds(judge)]).toEqual(['acted', ['lock-0']]);
  });
});

describe('a bypassed interlock', () => {
  const violated = (judge: InterlockJudge) => {
    const ids: string[] = [];
    judge.forEachViolated(({ id }) => ids.push(id));
    return ids;
  };

  it('is judged and shown, does not act and holds nothing up', () => {
    const judge = judgeOf({ action: 'pause' });
    judgeScan(judge, 0, 95);
    judge.find('lock-0')?.bypassUntil(0.25);
    judgeScan(judge, 0.1, 95);
    expect(judge.status()).toEqual([
      { id: 'lock-0', state: 'pending', isBypassed: true, bypass: null, isForced: false },
    ]);
    expect([actedIds(judge), violated(judge), judge.firstActed('pause')]).toEqual([[], [], null]);
  });

  it('acts at once when its bypass runs out and its condition still holds', () => {
    const judge = judgeOf({ delayS: 0.1 });
    judge.find('lock-0')?.bypassUntil(0.25);
    const acted = [0, 0.1, 0.2, 0.3].map((tS) => {
      judgeScan(judge, tS, 95);
      return [actedIds(judge).length, judge.bypassEnded.length];
    });
    expect(acted).toEqual([
      [0, 0],
      [0, 0],
      [0, 0],
      [1, 1],
    ]);
  });
});

describe('a forced interlock', () => {
  it('takes its condition as true, its delay included, for as long as it is forced', () => {
    const judge = judgeOf({ delayS: 0.1 });
    judgeScan(judge, 0, 70);
    judge.find('lock-0')?.forceUntil(0.35);
    const states = [0.1, 0.2, 0.3, 0.4].map((tS) => {
      judgeScan(judge, tS, 70);
      return judge.stateOf('lock-0');
    });
    expect(states).toEqual(['pending', 'acted', 'acted', 'clear']);
  });
});

describe('staleness of a sensor', () => {
  const readings = new Readings(['temp']);

  it('begins when the age is above the limit, not at it', () => {
    const judge = new StalenessJudge([{ channel: 'temp', afterS: 0.5 }], readings);
    readings.set(0, 50, Quality.good);
    judge.judge(readings, 10);
    readings.set(0, 50, Quality.stale);
    judge.judge(readings, 10.5);
    expect(judge.isStale('temp')).toBe(false);
    judge.judge(readings, 10.6);
    expect(judge.isStale('temp')).toBe(true);
    readings.set(0, 51, Quality.good);
    judge.judge(readings, 10.7);
    expect(judge.isStale('temp')).toBe(false);
  });

  it('holds for a sensor that was never read, and for one that gives no number', () => {
    const judge = new StalenessJudge([{ channel: 'temp', afterS: 0.5 }], readings);
    expect(judge.isStale('temp')).toBe(true);
    readings.set(0, NaN, Quality.good);
    judge.judge(readings, 0);
    expect(judge.isStale('temp')).toBe(true);
  });
});
