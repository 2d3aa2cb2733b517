import type { Step } from '@cresthold/shared';
import type { ParameterPath } from '../graph/parameter-path.js';

/** One field of a step's form. */
export interface StepField {
  /**
   * `numeric` takes a number or an expression over earlier results; `presence` switches a group of
   * parameters on, with `whenOn` for its first values, or off (null).
   */
  kind:
    | 'number'
    | 'numeric'
    | 'optional-number'
    | 'optional-numeric'
    | 'actuator'
    | 'channel'
    | 'choice'
    | 'switch'
    | 'presence'
    | 'expression'
    | 'optional-expression';
  path: ParameterPath;
  label: string;
  /** A unit, or where the channel stands whose unit it is, with what it is divided by. */
  unit?: string | { of: ParameterPath; per?: string };
  help?: string;
  whenOn?: unknown;
  /** Of a choice. */
  options?: readonly { value: string; label: string }[];
  /** What a choice shows where the document has none. */
  whenEmpty?: string;
  /** Where a choice stands for more than its text: what is chosen now, and the document's value of each. */
  chosen?: string;
  valueOf?: (chosen: string) => unknown;
}

/** A field as data. */
export const of = (
  kind: StepField['kind'],
  path: ParameterPath,
  label: string,
  more: Omit<StepField, 'kind' | 'path' | 'label'> = {},
): StepField => ({ kind, path, label, ...more });

/** The form of a step kind as data; targets of a Move, Survey and Seek have forms of their own. */
export function stepFields(step: Step): StepField[] {
  switch (step.kind) {
    case 'start':
    case 'finish':
    case 'survey':
    case 'seek':
      return [];
    case 'move':
      return [
        of('number', ['rampS'], 'Time of the ramp', {
          unit: 's',
          help: 'Longer where the slew limit asks for it.',
        }),
        of('number', ['timeoutS'], 'Give up after', { unit: 's' }),
      ];
    case 'settle':
      return [
        of('channel', ['channel'], 'Channel'),
        of('number', ['band'], 'Band, peak to peak', { unit: { of: ['channel'] } }),
        of('number', ['forS'], 'Stays within it for', { unit: 's' }),
        of('number', ['timeoutS'], 'Give up after', { unit: 's' }),
      ];
    case 'hold':
      return [of('number', ['durationS'], 'Time', { unit: 's' })];
    case 'check':
      return [
        of('expression', ['criterion'], 'Criterion', {
          help: 'True is met, e.g. seek.objective - seek.objectiveAtStart > 2',
        }),
      ];
  }
}
