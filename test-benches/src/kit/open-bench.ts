import { benchClock } from './bench-clock.js';
import type { BenchDefinition } from './bench-definition.js';
import { openBenchLog, type BenchLog } from './bench-log.js';
import type { BenchOptions } from './bench-options.js';
import type { FaultedModel } from './faulted-model.js';
import { makeFaultedModel } from './make-faulted-model.js';
import { openBenchFace, type BenchPlace } from './open-bench-face.js';
import { watchWatchdog } from './watch-watchdog.js';

/** How often the model runs on by itself: short beside the watchdog, ms. */
const tickMs = 10;
const truthEveryMs = 100;
/** Longer than this without a turn is a hold-up of the bench itself, ms. */
const stallMs = 60;

export interface OpenedBench {
  readonly place: BenchPlace;
  close(): Promise<void>;
}

/** Opens a bench with its wire face; bench time is wall time times `speed`, from now on. */
export async function openBench(definition: BenchDefinition, options: BenchOptions): Promise<OpenedBench> {
  const log = openBenchLog(options.log);
  const { seed, noise: isNoisy, drift: isDrifting } = options;
  const settings = { seed, isNoisy, isDrifting };
  const model = makeFaultedModel(definition, settings, options.own, options.faults);
  const benchS = benchClock(() => performance.now(), options.speed, stallMs);
  const checkWatchdog = watchWatchdog(model.model, (isTripped, count) =>
    log.add(model.tS, { event: 'watchdog', isTripped, count }),
  );
  const catchUp = () => {
    model.advanceTo(benchS());
    checkWatchdog();
  };
  const face = await openBenchFace(definition.wire, options, model, catchUp, log);
  model.onFault = (fault, isOn) => {
    log.add(model.tS, { event: 'fault', fault, isOn });
    if (fault === 'reboot' && isOn) face.hangUp();
  };
  const tick = setInterval(catchUp, tickMs);
  const truth = options.log === null ? undefined : setInterval(() => noteTruth(log, model), truthEveryMs);
  return {
    place: face.place,
    async close() {
      clearInterval(tick);
      clearInterval(truth);
      await face.close();
      log.close();
    },
  };
}

function noteTruth(log: BenchLog, model: FaultedModel): void {
  log.add(model.tS, { event: 'truth', ...model.model.truth });
}
