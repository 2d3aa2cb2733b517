import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { BowlModel } from './bowl-bench.fixture.js';

const settings = { seed: 5, isNoisy: true, isDrifting: false };
const shown = (model: BowlModel) => [model.read('depth'), model.read('age'), ...model.readTrace('wall')];

describe('a model in fixed steps', () => {
  it('takes the same course however often it is looked at', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 30 }), { maxLength: 20 }), (tenths) => {
        const [often, once] = [new BowlModel(settings), new BowlModel(settings)];
        for (const tS of tenths.map((tenth) => tenth / 10).sort((a, b) => a - b)) often.advanceTo(tS);
        often.advanceTo(3);
        once.advanceTo(3);
        expect(shown(often)).toEqual(shown(once));
      }),
    );
  });

  it('does not lose a step to the rounding of summed times', () => {
    const model = new BowlModel(settings);
    let tS = 0;
    for (let i = 1; i <= 1000; i += 1) {
      model.advanceTo((tS += 0.1));
      expect(model.tS).toBeCloseTo(i / 10, 6);
    }
  });

  it('ignores the past', () => {
    const model = new BowlModel(settings);
    model.advanceTo(2);
    model.advanceTo(1);
    expect(model.tS).toBeCloseTo(2, 9);
  });

  it('refuses what it does not have', () => {
    const model = new BowlModel(settings);
    expect(() => model.read('width')).toThrow(RangeError);
    expect(() => model.readTrace('depth')).toThrow(RangeError);
    expect([model.write('depth', 1), model.write('place', NaN)]).toEqual([false, false]);
  });
});
