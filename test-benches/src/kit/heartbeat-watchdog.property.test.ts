import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  beatWatchdog,
  initialWatchdog,
  stepWatchdog,
  watchdogTimeoutS,
  type WatchdogState,
} from './heartbeat-watchdog.js';

/** Gaps between heartbeats in hundredths of a second, so that they fall on steps. */
const gaps = fc.array(fc.integer({ min: 1, max: 400 }), { minLength: 1, maxLength: 40 });

/** Plays heartbeats with these gaps, stepping every hundredth; tells of the state after each step. */
function play(beats: number[], told: (state: WatchdogState, sinceBeat: number) => void): WatchdogState {
  let state = initialWatchdog;
  let now = 0;
  beats.forEach((gap, index) => {
    for (let i = 1; i <= gap; i += 1) {
      now += 1;
      state = stepWatchdog(state, now / 100);
      told(state, index === 0 ? Infinity : i);
    }
    state = beatWatchdog(state, index + 1, now / 100);
  });
  return state;
}

describe('the watchdog, for any heartbeats', () => {
  it('is tripped whenever the last change is its timeout ago', () => {
    fc.assert(
      fc.property(gaps, (beats) => {
        play(beats, (state, sinceBeat) => {
          if (sinceBeat >= watchdogTimeoutS * 100) expect(state.isTripped).toBe(true);
        });
      }),
    );
  });

  it('trips at no other time: never while changes come within its timeout', () => {
    fc.assert(
      fc.property(gaps, (beats) => {
        let was = initialWatchdog;
        play(beats, (state, sinceBeat) => {
          if (!was.isTripped && state.isTripped) expect(sinceBeat).toBe(watchdogTimeoutS * 100);
          was = state;
        });
      }),
    );
  });

  it('counts each trip once', () => {
    fc.assert(
      fc.property(gaps, (beats) => {
        let trips = 0;
        let was = initialWatchdog;
        const last = play(beats, (state) => {
          if (!was.isTripped && state.isTripped) trips += 1;
          was = state;
        });
        expect(last.count).toBe(trips);
      }),
    );
  });
});
