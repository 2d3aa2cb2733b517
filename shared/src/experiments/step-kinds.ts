import type { Step, StepKind } from './experiment.schema.js';
import { surveyResultNames } from './survey/survey-results.js';

interface StepKindFacts {
  title: string;
  /** One sentence for the palette. */
  purpose: string;
  /** Outcomes by which a run leaves the step. */
  ports: readonly string[];
  /** Ports that need no edge: the run then stops in order with the verdict `inconclusive`. */
  optionalPorts: readonly string[];
}

/** What each step kind is, for palette, preflight and sequencer alike. */
export const stepKinds: Record<StepKind, StepKindFacts> = {
  start: { title: 'Start', purpose: 'Where every run begins.', ports: ['done'], optionalPorts: [] },
  move: {
    title: 'Move',
    purpose: 'Ramps actuators to given values.',
    ports: ['done', 'timeout'],
    optionalPorts: ['timeout'],
  },
  settle: {
    title: 'Settle',
    purpose: 'Waits until a channel stays within a band.',
    ports: ['done', 'timeout'],
    optionalPorts: ['timeout'],
  },
  hold: {
    title: 'Hold',
    purpose: 'Keeps everything where it is for a time.',
    ports: ['done'],
    optionalPorts: [],
  },
  survey: {
    title: 'Survey',
    purpose: 'Maps the objective over one actuator or two, up and down.',
    ports: ['done', 'failed'],
    optionalPorts: ['failed'],
  },
  seek: {
    title: 'Seek',
    purpose: 'Steers actuators to the best side of the objective by a seeking law.',
    ports: ['done', 'failed'],
    optionalPorts: ['failed'],
  },
  check: {
    title: 'Check',
    purpose: 'Judges a criterion and so the verdict.',
    ports: ['yes', 'no'],
    optionalPorts: [],
  },
  finish: { title: 'Finish', purpose: 'Ends the run in order.', ports: [], optionalPorts: [] },
};

/**
 * Names of the values that a step leaves behind, as later expressions use them.
 *
 * @example
 * resultNames(holdForAMinute) // ['hold.objective']
 */
export function resultNames(step: Step): string[] {
  const name = (suffix: string) => `${step.id}.${suffix}`;
  switch (step.kind) {
    case 'start':
    case 'check':
    case 'finish':
      return [];
    case 'move':
      return [name('durationS')];
    case 'settle':
      return [name('mean'), name('durationS')];
    case 'hold':
      return [name('objective')];
    case 'survey':
      return surveyResultNames(step.parameters).map(name);
    case 'seek':
      return [
        ...step.parameters.actuators.map(({ channel }) => name(`best.${channel}`)),
        /** Mean of the objective over the last whole dither periods. */
        name('objective'),
        /** Objective over the first whole dither periods, for comparison. */
        name('objectiveAtStart'),
        name('durationS'),
        /** 1 where convergence ended it, else 0. */
        name('isConverged'),
        /** 1 where an estimate ended at an edge of its box, so that the best may lie beyond, else 0. */
        name('isAtEdge'),
      ];
  }
}
