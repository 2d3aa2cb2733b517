import {
  bestTrim,
  efficiencyAt,
  flueGasAt,
  nominalAirTempC,
  nominalCriticalLambda,
  type BestTrim,
  type FlueGas,
} from './burner-physics.js';
import {
  beatWatchdog,
  initialWatchdog,
  stepWatchdog,
  waitingWatchdog,
  type WatchdogState,
} from '../kit/heartbeat-watchdog.js';

/** Where the damper goes when the watchdog acts: much air, so that nothing unburnt gathers. */
export const safeTrimPct = 70;
/** Rate limit of the damper actuator, % per s of bench time. */
export const damperRatePctPerS = 8;
/** Lag of the in-situ gas analysis and of the flue temperature, s of bench time. */
export const sensorTimeConstantS = 1;
/** Fuel flow with the flame lit, m³/h. */
export const fuelFlowM3PerH = 12.5;
/** Standard deviations of the readings' noise. */
export const noiseSigma = {
  o2Pct: 0.02,
  coRelative: 0.02,
  coPpm: 3,
  flueTempC: 0.1,
  airTempC: 0.05,
  fuel: 0.02,
};

/** Of the critical excess-air ratio: 0.02 moves the best air trim by 2 %. */
const drift = { amplitude: 0.02, periodS: 1200 };

/** All of the burner that changes, in bench time. */
export interface BurnerState {
  /** Bench time, s. */
  tS: number;
  /** Air trim that was last commanded, %; the watchdog overwrites it with the safe position. */
  commandPct: number;
  /** Where the damper is, %. */
  damperPct: number;
  isFlameOn: boolean;
  /** What the instruments show before noise. */
  measured: FlueGas;
  watchdog: WatchdogState;
}

export interface BurnerParameters {
  isDrifting: boolean;
}

/** The flue gas with the flame out: cold air. */
const coldAir: FlueGas = { o2Pct: 21, coPpm: 0, flueTempC: nominalAirTempC };

export const initialBurner: BurnerState = {
  tS: 0,
  commandPct: safeTrimPct,
  damperPct: safeTrimPct,
  isFlameOn: false,
  measured: coldAir,
  watchdog: initialWatchdog,
};

/** The critical excess-air ratio at a bench time: fuel quality and burner wander slowly. */
export function criticalLambdaAt(tS: number, parameters: BurnerParameters): number {
  if (!parameters.isDrifting) return nominalCriticalLambda;
  return nominalCriticalLambda + drift.amplitude * Math.sin((2 * Math.PI * tS) / drift.periodS);
}

/** A write to the air-trim register. */
export function commandTrim(state: BurnerState, trimPct: number): BurnerState {
  return { ...state, commandPct: trimPct };
}

/** A write to the heartbeat register. */
export function beatHeart(state: BurnerState, beat: number): BurnerState {
  return { ...state, watchdog: beatWatchdog(state.watchdog, beat, state.tS) };
}

/** After its controller lost power: command at rest, flame out until heartbeats come. */
export function rebootBurner(state: BurnerState): BurnerState {
  const { count } = state.watchdog;
  return {
    ...state,
    commandPct: safeTrimPct,
    isFlameOn: false,
    watchdog: { ...waitingWatchdog(state.tS), count },
  };
}

/** The burner `dtS` later; pure. Exact for a constant damper, so that the step may be long. */
export function step(state: BurnerState, dtS: number, parameters: BurnerParameters): BurnerState {
  const tS = state.tS + dtS;
  const watchdog = stepWatchdog(state.watchdog, tS);
  const isFlameOn = !watchdog.isTripped;
  const commandPct = watchdog.isTripped ? safeTrimPct : state.commandPct;
  const reach = damperRatePctPerS * dtS;
  const damperPct = state.damperPct + Math.min(Math.max(commandPct - state.damperPct, -reach), reach);
  const goal = isFlameOn ? flueGasAt(damperPct, criticalLambdaAt(tS, parameters)) : coldAir;
  return {
    tS,
    commandPct,
    damperPct,
    isFlameOn,
    measured: lagged(state.measured, goal, 1 - Math.exp(-dtS / sensorTimeConstantS)),
    watchdog,
  };
}

function lagged(from: FlueGas, to: FlueGas, share: number): FlueGas {
  return {
    o2Pct: from.o2Pct + share * (to.o2Pct - from.o2Pct),
    coPpm: from.coPpm + share * (to.coPpm - from.coPpm),
    flueTempC: from.flueTempC + share * (to.flueTempC - from.flueTempC),
  };
}

/** What only the instructor knows. */
export interface BurnerStanding {
  best: BestTrim;
  /** Efficiency at the damper's position without lag and noise, %; NaN with the flame out. */
  efficiencyPct: number;
  trimPct: number;
}

export function truthOf(state: BurnerState, parameters: BurnerParameters): BurnerStanding {
  const criticalLambda = criticalLambdaAt(state.tS, parameters);
  return {
    best: bestTrim(criticalLambda),
    efficiencyPct: state.isFlameOn ? efficiencyAt(state.damperPct, criticalLambda) : NaN,
    trimPct: state.damperPct,
  };
}
