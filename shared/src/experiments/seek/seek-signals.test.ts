import { describe, expect, it } from 'vitest';
import { seekingLaws } from '../../seeking/seeking-laws.js';
import { wideSearch } from '../../seeking/wide-search.js';
import { seekSignalNames } from './seek-signals.js';

describe('names of a law’s signals', () => {
  it('carry the channel of their actuator, of both where they are of two, and none where they are of all', () => {
    expect(seekSignalNames(seekingLaws.gradient, ['airTrim'])).toEqual([
      'estimate.airTrim',
      'washout.airTrim',
      'demodulated.airTrim',
      'gradient.airTrim',
    ]);
    expect(seekSignalNames(seekingLaws.spsa, ['a', 'b'])).toEqual([
      'estimate.a',
      'gradient.a',
      'estimate.b',
      'gradient.b',
    ]);
    expect(seekSignalNames(seekingLaws.newton, ['a', 'b']).slice(-3)).toEqual([
      'hessian.a.a',
      'hessian.b.a',
      'hessian.b.b',
    ]);
    expect(seekSignalNames(seekingLaws.newton, ['a']).at(-1)).toBe('hessian.a.a');
    expect(seekSignalNames(seekingLaws.constrained, ['a']).at(-1)).toBe('margin');
    expect(seekSignalNames(seekingLaws.constrained, ['a', 'b']).at(-1)).toBe('margin');
    expect(seekSignalNames(wideSearch(seekingLaws.gradient), ['a']).slice(-3)).toEqual([
      'searchPhase',
      'searchPoint',
      'bestScore',
    ]);
  });

  it('are as many as the law has, each once, for up to sixteen actuators', () => {
    for (const law of Object.values(seekingLaws)) {
      for (let n = 1; n <= Math.min(16, law.actuatorsMax); n += 1) {
        const channels = Array.from({ length: n }, (_, i) => `channel${i + 1}`);
        const names = seekSignalNames(law, channels);
        expect(names.length).toBe(law.signalNames(n).length);
        expect(new Set(names).size).toBe(names.length);
        for (const channel of channels) expect(names).toContain(`estimate.${channel}`);
      }
    }
  });
});
