import { benchClock } from '../kit/bench-clock.js';
import { openBenchLog, type BenchLogEntry } from './bench-log.js';
import type { BurnerOptions } from './burner-options.js';
import { burnerRegisterMap } from './burner-registers.js';
import { BurnerSimulation } from './burner-simulation.js';
import { openModbusFace, type RegisterMap } from './modbus-face.js';

/** How often the model runs on by itself: short beside the watchdog, ms. */
const tickMs = 10;
const truthEveryMs = 100;
/** Longer than this without a turn is a hold-up of the bench itself, ms. */
const stallMs = 60;

export interface BurnerBench {
  readonly port: number;
  close(): Promise<void>;
}

/** Opens the burner with its wire face; bench time is wall time times `speed`, from now on. */
export async function openBurnerBench(options: BurnerOptions): Promise<BurnerBench> {
  const log = openBenchLog(options.log);
  const simulation = new BurnerSimulation({
    seed: options.seed,
    isNoisy: options.noise,
    isDrifting: options.drift,
  });
  const benchS = benchClock(() => performance.now(), options.speed, stallMs);
  const catchUp = () => simulation.advanceTo(benchS());
  simulation.onWatchdog = (isTripped, count) =>
    log.add(simulation.now.tS, { event: 'watchdog', isTripped, count });

  const map = burnerRegisterMap(simulation, (unit, register, value, engineering) =>
    log.add(simulation.now.tS, { event: 'write', unit, register, value, engineering }),
  );
  const face = await openModbusFace(inPresentTime(map, catchUp), options.host, options.port);
  const tick = setInterval(catchUp, tickMs);
  const noteTruth = () => log.add(simulation.now.tS, truthEntry(simulation));
  const truth = options.log === null ? undefined : setInterval(noteTruth, truthEveryMs);

  return {
    port: face.port,
    async close() {
      clearInterval(tick);
      clearInterval(truth);
      await face.close();
      log.close();
    },
  };
}

function truthEntry(simulation: BurnerSimulation): BenchLogEntry {
  const { best, efficiencyPct, trimPct } = simulation.truth;
  return {
    event: 'truth',
    efficiency: Number.isFinite(efficiencyPct) ? efficiencyPct : null,
    bestEfficiency: best.efficiencyPct,
    bestTrim: best.trimPct,
    trim: trimPct,
  };
}

/** Brings the model up to the moment of each request before it is answered. */
function inPresentTime(map: RegisterMap, catchUp: () => void): RegisterMap {
  return {
    read: (unit, address, count) => {
      catchUp();
      return map.read(unit, address, count);
    },
    write: (unit, address, values) => {
      catchUp();
      map.write(unit, address, values);
    },
  };
}
