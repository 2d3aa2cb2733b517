import type { ExperimentGraph } from '../experiments/experiment.schema.js';
import type { Sequencer } from '../experiments/sequencer.types.js';

/**
 * Best-known value of each actuator so far: the estimate of a seeking law that is at work, else the
 * latest result `<step>.best.<actuator>`.
 */
export function bestPoint(graph: ExperimentGraph, sequencer: Sequencer): Record<string, number> {
  const best: Record<string, number> = {};
  for (const [name, value] of sequencer.results) {
    const [, middle, channel] = name.split('.');
    if (middle === 'best' && channel && channel !== 'objective' && Number.isFinite(value)) {
      best[channel] = value;
    }
  }
  for (const step of graph.steps) {
    if (step.kind !== 'seek') continue;
    const estimate = sequencer.signals[sequencer.signalNames.indexOf(`${step.id}.estimate`)] ?? NaN;
    if (Number.isFinite(estimate)) best[step.parameters.actuator] = estimate;
  }
  return best;
}
