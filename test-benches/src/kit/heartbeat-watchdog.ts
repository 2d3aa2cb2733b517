/** The rig's own watchdog: what it does must not hang on any other computer. */
export interface WatchdogState {
  /** Last value of the heartbeat register. */
  beat: number;
  /** Bench time of the last change, s. */
  changedS: number;
  /** Bench time since when changes have come without a gap, s. */
  liveSinceS: number;
  isTripped: boolean;
  /** Trips since the bench began; waiting for the first heartbeat is none. */
  count: number;
}

/** No change for this long trips, s of bench time. */
export const watchdogTimeoutS = 2;
/** Changes for this long without a gap clear it, s of bench time. */
export const watchdogRecoveryS = 1;

/** Waits for its first heartbeat: nothing runs before a host is known to live. @param nowS bench time, s */
export function waitingWatchdog(nowS: number): WatchdogState {
  const longAgoS = nowS - watchdogTimeoutS;
  return { beat: 0, changedS: longAgoS, liveSinceS: longAgoS, isTripped: true, count: 0 };
}

export const initialWatchdog: WatchdogState = waitingWatchdog(0);

/** Allows for the rounding of summed time steps, s. */
const roundingS = 1e-9;

/** A write to the heartbeat register at bench time `nowS`; the same value again is no life sign. */
export function beatWatchdog(state: WatchdogState, beat: number, nowS: number): WatchdogState {
  if (beat === state.beat) return state;
  const isGap = nowS - state.changedS >= watchdogTimeoutS - roundingS;
  const liveSinceS = isGap ? nowS : state.liveSinceS;
  const hasRecovered = nowS - liveSinceS >= watchdogRecoveryS - roundingS;
  return {
    ...state,
    beat,
    changedS: nowS,
    liveSinceS,
    isTripped: state.isTripped && !hasRecovered,
  };
}

/** The watchdog at bench time `nowS`. */
export function stepWatchdog(state: WatchdogState, nowS: number): WatchdogState {
  if (state.isTripped || nowS - state.changedS < watchdogTimeoutS - roundingS) return state;
  return { ...state, isTripped: true, count: state.count + 1 };
}
