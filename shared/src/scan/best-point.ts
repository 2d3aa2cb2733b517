import type { ExperimentGraph } from '../experiments/experiment.schema.js';
import { estimateColumn } from '../experiments/seek/seek-signals.js';
import type { Sequencer } from '../experiments/sequencer.types.js';

/**
 * Best-known value of each actuator so far: the estimate of a seeking law that is at work, else the
 * latest result `<step>.best.<actuator>`. A wide search on its way round knows no better than before.
 */
export function bestPoint(graph: ExperimentGraph, sequencer: Sequencer): Record<string, number> {
  const best: Record<string, number> = {};
  for (const [name, value] of sequencer.results) {
    const [, middle, channel] = name.split('.');
    if (middle === 'best' && channel && channel !== 'objective' && Number.isFinite(value)) {
      best[channel] = value;
    }
  }
  const signal = (name: string) => sequencer.signals[sequencer.signalNames.indexOf(name)] ?? NaN;
  for (const step of graph.steps) {
    if (step.kind !== 'seek' || signal(`${step.id}.searchPhase`) > 0) continue;
    for (const { channel } of step.parameters.actuators) {
      const estimate = signal(estimateColumn(step.id, channel));
      if (Number.isFinite(estimate)) best[channel] = estimate;
    }
  }
  return best;
}
