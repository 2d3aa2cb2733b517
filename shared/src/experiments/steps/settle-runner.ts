import type { StepOf } from '../experiment.schema.js';
import { StayWithin } from './stay-within.js';
import { done, isOver, noSignals, type StepRunner, type StepServices } from './step-runner.js';

/** Waits until a channel stays within a band; a reading that is not good begins the time anew. */
export function createSettleRunner(step: StepOf<'settle'>, services: StepServices): StepRunner {
  const { id, parameters } = step;
  const { channel, band, forS, timeoutS } = parameters;
  const watch = new StayWithin(forS);
  let elapsedS = 0;
  const leave = () => {
    services.setResult(id, 'mean', watch.mean);
    services.setResult(id, 'durationS', elapsedS);
  };
  return {
    id,
    kind: step.kind,
    signalNames: [],
    signals: noSignals,
    begin() {
      watch.clear();
      elapsedS = 0;
      return null;
    },
    step(input) {
      const value = input.readings.goodValue(input.readings.indexOf(channel));
      if (Number.isNaN(value)) watch.clear();
      else watch.add(value, input.dtS);
      if (watch.hasStayed(band, services.periodS / 2)) {
        leave();
        return done;
      }
      if (isOver(elapsedS, timeoutS, services.periodS)) {
        leave();
        return { port: 'timeout', reason: `"${channel}" did not stay within ${band} for ${forS} s.` };
      }
      elapsedS += input.dtS;
      return null;
    },
  };
}
