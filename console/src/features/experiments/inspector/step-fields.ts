import type { Step, StepOf } from '@cresthold/shared';
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
    | 'switch'
    | 'presence'
    | 'expression'
    | 'optional-expression';
  path: ParameterPath;
  label: string;
  /** A unit, or where the channel stands whose unit it is. */
  unit?: string | { of: ParameterPath };
  help?: string;
  whenOn?: unknown;
}

const of = (
  kind: StepField['kind'],
  path: ParameterPath,
  label: string,
  more: Pick<StepField, 'unit' | 'help' | 'whenOn'> = {},
): StepField => ({ kind, path, label, ...more });

const first = (name: string): ParameterPath => ['actuators', 0, name];
const firstUnit = { of: first('channel') };

/** The form of a step kind as data; targets of a Move have a form of their own. */
export function stepFields(step: Step): StepField[] {
  switch (step.kind) {
    case 'start':
    case 'finish':
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
    case 'survey':
      return [
        of('actuator', first('channel'), 'Actuator'),
        of('numeric', first('from'), 'From', { unit: firstUnit }),
        of('numeric', first('to'), 'To', { unit: firstUnit }),
        of('number', first('points'), 'Points'),
        of('number', ['settleS'], 'Settle at each for', { unit: 's' }),
        of('number', ['averageS'], 'Then average for', { unit: 's' }),
        of('switch', first('isUpAndDown'), 'Up and down again', {
          help: 'The way back shows hysteresis and drift.',
        }),
      ];
    case 'seek':
      return seekFields(step);
    case 'check':
      return [
        of('expression', ['criterion'], 'Criterion', {
          help: 'True is met, e.g. seek.objective - seek.objectiveAtStart > 2',
        }),
      ];
  }
}

const seekFields = (step: StepOf<'seek'>): StepField[] => [
  ...lawFields,
  ...(step.parameters.end.whenConverged === null ? [] : convergenceFields),
  of('optional-expression', ['end', 'when'], 'Ends earlier when', { help: 'Empty: never by a condition.' }),
  of('number', ['invalidForS'], 'Gives up when invalid for', {
    unit: 's',
    help: 'Until then it waits at the last good point.',
  }),
];

const convergenceFields: StepField[] = [
  of('number', ['end', 'whenConverged', 'band'], 'Converged within, peak to peak', {
    unit: firstUnit,
    help: 'Of the estimate, averaged over whole dither periods.',
  }),
  of('number', ['end', 'whenConverged', 'forS'], 'Converged for', { unit: 's' }),
];

const lawFields: StepField[] = [
  of('actuator', first('channel'), 'Actuator'),
  of('numeric', first('amplitude'), 'Dither amplitude', {
    unit: firstUnit,
    help: 'Half of peak to peak.',
  }),
  of('numeric', first('periodS'), 'Dither period', {
    unit: 's',
    help: 'Slower than the plant, faster than the drift.',
  }),
  of('numeric', first('gain'), 'Gain', { help: 'Actuator unit per second for each unit of slope.' }),
  of('numeric', first('phaseDeg'), 'Demodulation lag', {
    unit: '°',
    help: 'Lag of the plant less lead of the washout.',
  }),
  of('number', ['law', 'parameters', 'washoutRatio'], 'Washout corner', {
    help: 'As a fraction of the dither frequency.',
  }),
  of('number', ['law', 'parameters', 'lowPassRatio'], 'Low-pass corner', {
    help: 'As a fraction of the dither frequency.',
  }),
  of('optional-numeric', first('min'), 'Not below', {
    unit: firstUnit,
    help: 'Empty: as the envelope says.',
  }),
  of('optional-numeric', first('max'), 'Not above', {
    unit: firstUnit,
    help: 'Empty: as the envelope says.',
  }),
  of('number', ['end', 'afterS'], 'Ends after', { unit: 's' }),
  of('presence', ['end', 'whenConverged'], 'Ends earlier when converged', {
    whenOn: { band: 1, forS: 60 },
  }),
];
