import type { ExperimentGraph, Rig, SeekActuator, Step, StepKind, SurveyActuator } from '@cresthold/shared';

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
          actuators: [newSurveyActuator(actuator, range)],
          settleS: 3,
          averageS: 2,
          choose: 'highest',
        },
      };
    case 'seek':
      return {
        kind,
        ...base,
        parameters: {
          law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.3, taper: null } },
          actuators: [newSeekActuator(actuator, range)],
          constraint: null,
          wideSearch: null,
          end: { afterS: 300, whenConverged: null, when: null },
          invalidForS: 30,
        },
      };
    case 'check':
      return { kind, ...base, parameters: { criterion: 'objective > 0' } };
  }
}

interface Range {
  min: number;
  max: number;
}

/** A survey's actuator over the middle four fifths of its range. */
export function newSurveyActuator(channel: string, { min, max }: Range): SurveyActuator {
  const margin = 0.1 * (max - min);
  return { channel, from: tidy(min + margin), to: tidy(max - margin), points: 9, isUpAndDown: true };
}

/** A seek's actuator with a dither of a fiftieth of its range. */
export function newSeekActuator(channel: string, { min, max }: Range): SeekActuator {
  return {
    channel,
    min: null,
    max: null,
    amplitude: tidy((max - min) / 50),
    periodS: 5,
    phaseDeg: 0,
    dither: null,
    measuredChannel: null,
    gain: 1,
    speedMax: null,
    own: {},
  };
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

/** Where an actuator may go: by the envelope in force, or as it is shown where there is none. */
export function rangeFor(channelId: string, defaults: StepDefaults): { min: number; max: number } {
  const display = defaults.rig.channels.find((channel) => channel.id === channelId)?.display;
  return defaults.rangeOf(channelId) ?? display ?? { min: 0, max: 1 };
}

/** Three significant digits: a start value for a person, not a result. */
function tidy(value: number): number {
  return Number(value.toPrecision(3));
}
