import type { ExperimentGraph, Rig, Step, StepKind } from '@cresthold/shared';

/** What a fresh step takes its first values from. */
export interface StepDefaults {
  rig: Rig;
  /** Range within which the envelope allows the actuator, if one is in force. */
  rangeOf: (channel: string) => { min: number; max: number } | null;
}

/**
 * A step of a kind with values that make sense on the rig, and an id that the graph does not use yet.
 *
 * @example
 * newStep('seek', graph, { x: 0, y: 0 }, defaults).id // 'seek', or 'seek2' where 'seek' is taken
 */
export function newStep(
  kind: StepKind,
  graph: ExperimentGraph,
  position: { x: number; y: number },
  defaults: StepDefaults,
): Step {
  const base = { id: freeStepId(kind, graph), title: '', position };
  const actuator = firstOf(defaults.rig, 'actuator');
  const range = actuator ? rangeFor(actuator, defaults) : { min: 0, max: 1 };
  const span = range.max - range.min;
  switch (kind) {
    case 'start':
    case 'finish':
      return { kind, ...base, parameters: {} };
    case 'move':
      return {
        kind,
        ...base,
        parameters: {
          targets: [{ channel: actuator, value: tidy(range.min + span / 2) }],
          rampS: 10,
          timeoutS: 60,
        },
      };
    case 'settle':
      return {
        kind,
        ...base,
        parameters: { channel: firstOf(defaults.rig, 'sensor'), band: 1, forS: 5, timeoutS: 60 },
      };
    case 'hold':
      return { kind, ...base, parameters: { durationS: 30 } };
    case 'survey':
      return {
        kind,
        ...base,
        parameters: {
          actuator,
          from: tidy(range.min + 0.1 * span),
          to: tidy(range.max - 0.1 * span),
          points: 9,
          settleS: 3,
          averageS: 2,
          isUpAndDown: true,
        },
      };
    case 'seek':
      return {
        kind,
        ...base,
        parameters: {
          actuator,
          law: 'gradient',
          ditherAmplitude: tidy(span / 50),
          ditherPeriodS: 5,
          washoutRatio: 0.3,
          lowPassRatio: 0.3,
          gain: 1,
          phaseDeg: 0,
          min: null,
          max: null,
          end: { afterS: 300, whenConverged: null, when: null },
          invalidForS: 30,
        },
      };
    case 'check':
      return { kind, ...base, parameters: { criterion: 'objective > 0' } };
  }
}

/** @returns the kind itself, or the kind with the first free number from 2 */
export function freeStepId(wanted: string, graph: ExperimentGraph): string {
  const taken = new Set(graph.steps.map((step) => step.id));
  if (!taken.has(wanted)) return wanted;
  const stem = wanted.replace(/\d+$/, '');
  let number = 2;
  while (taken.has(`${stem}${number}`)) number += 1;
  return `${stem}${number}`;
}

function firstOf(rig: Rig, kind: 'actuator' | 'sensor'): string {
  return rig.channels.find((channel) => channel.kind === kind)?.id ?? '';
}

function rangeFor(channelId: string, defaults: StepDefaults): { min: number; max: number } {
  const display = defaults.rig.channels.find((channel) => channel.id === channelId)?.display;
  return defaults.rangeOf(channelId) ?? display ?? { min: 0, max: 1 };
}

/** Three significant digits: a start value for a person, not a result. */
function tidy(value: number): number {
  return Number(value.toPrecision(3));
}
