import {
  ditherChoices,
  ditherOf,
  fieldsOf,
  lawFields,
  seekActuatorFields,
  seekingLawIds,
  seekingLaws,
  visitSchema,
  type LawField,
  type StepOf,
} from '@cresthold/shared';
import type { ParameterPath } from '../graph/parameter-path.js';
import { of, type StepField } from './step-fields.js';

type Seek = StepOf<'seek'>;

export const lawChoices = seekingLawIds.map((id) => ({ value: id, label: seekingLaws[id].title }));

/** Units that fit behind a number; longer ones go into the help text. */
const unitLengthMax = 4;

/** Fields of a parameter of a law, all from its own description. */
function fieldsOfLaw(
  field: LawField,
  path: ParameterPath,
  value: unknown,
  actuator: ParameterPath,
): StepField[] {
  const { type, title, help, isNullable, options, fields } = field;
  if (type === 'list') return [];
  if (type === 'choice') {
    return [of('choice', path, title, { help, options: options.map((value) => ({ value, label: value })) })];
  }
  if (type === 'number') {
    return [of(isNullable ? 'optional-numeric' : 'numeric', path, title, unitAndHelp(field, actuator))];
  }
  const inner = value as Record<string, unknown> | null | undefined;
  const inside = fields.flatMap((one) => fieldsOfLaw(one, [...path, one.name], inner?.[one.name], actuator));
  if (!isNullable) return inside;
  const whenOn = Object.fromEntries(fields.map((one) => [one.name, one.initial]));
  return [of('presence', path, title, { help, whenOn }), ...(inner ? inside : [])];
}

function unitAndHelp({ unit, help }: LawField, actuator: ParameterPath): Pick<StepField, 'unit' | 'help'> {
  if (unit === 'actuator unit') return { unit: { of: actuator }, help };
  if (unit === 'actuator unit / s') return { unit: { of: actuator, per: 's' }, help };
  if (unit.length <= unitLengthMax) return { unit, help };
  return { help: `${help} In ${unit.startsWith('of ') ? `shares ${unit}` : unit}.` };
}

/** What the law takes beside its actuators. */
export function lawSection({ parameters }: Seek): StepField[] {
  const { id, parameters: values } = parameters.law;
  return lawFields(id).flatMap((field) =>
    fieldsOfLaw(field, ['law', 'parameters', field.name], values[field.name], ['actuators', 0, 'channel']),
  );
}

const asEnvelope = 'Empty: as the envelope says.';

/** One actuator: channel and box, how it dithers, and what the law wants of it. */
export function actuatorSection({ parameters }: Seek, index: number): StepField[] {
  const { id } = parameters.law;
  const actuator = parameters.actuators[index];
  if (!actuator) return [];
  const at = (...rest: (string | number)[]): ParameterPath => ['actuators', index, ...rest];
  const channel = at('channel');
  const kinds = ditherChoices(id);
  const kind = ditherOf(id, actuator);
  return [
    of('actuator', channel, 'Actuator'),
    ...(kinds.length > 1
      ? [
          of('choice', at('dither'), 'Dither', {
            options: kinds.map((value, i) => ({ value, label: i === 0 ? `${value} (usual)` : value })),
            whenEmpty: kinds[0],
          }),
        ]
      : []),
    ...(kind === 'measured'
      ? [
          of('channel', at('measuredChannel'), 'Ripple measured on', {
            help: 'A channel in the actuator’s unit.',
          }),
        ]
      : []),
    ...seekActuatorFields(id).map((field) =>
      of(
        field.isNullable ? 'optional-numeric' : 'numeric',
        at(...field.place),
        field.title,
        unitAndHelp(field, channel),
      ),
    ),
    of('optional-numeric', at('min'), 'Estimate not below', { unit: { of: channel }, help: asEnvelope }),
    of('optional-numeric', at('max'), 'Estimate not above', { unit: { of: channel }, help: asEnvelope }),
  ];
}

/** The bound of a constrained law. */
export function constraintSection({ parameters }: Seek): StepField[] {
  if (parameters.constraint === null) return [];
  return [
    of('expression', ['constraint', 'expression'], 'Quantity', {
      help: 'Followed scan by scan, e.g. a channel.',
    }),
    of('numeric', ['constraint', 'bound'], 'Bound', {
      help: 'In the unit of the quantity; fixed when the step begins.',
    }),
  ];
}

const firstStarts: Record<string, unknown> = {
  grid: { by: 'grid', points: 5 },
  spread: { by: 'spread', count: 5 },
};

/** Where a wide search looks, how long and when again. */
export function wideSearchSection({ parameters }: Seek): StepField[] {
  const { wideSearch } = parameters;
  const on = of('presence', ['wideSearch'], 'Look around first', {
    help: 'Visits many points and seeks from the best of them: for a landscape with several hills.',
    whenOn: { starts: firstStarts['grid'], visit: { settleS: 5, seekS: 0, averageS: 2 } },
  });
  if (wideSearch === null) return [on];
  const place: ParameterPath = ['wideSearch', 'starts'];
  const visit = fieldsOf(visitSchema).filter(({ name }) => name !== 'starts');
  return [
    on,
    of('choice', place, 'Points', {
      options: [
        { value: 'grid', label: 'on a grid' },
        { value: 'spread', label: 'spread evenly' },
        ...(wideSearch.starts.by === 'list' ? [{ value: 'list', label: 'as listed' }] : []),
      ],
      chosen: wideSearch.starts.by,
      valueOf: (by: string) => firstStarts[by] ?? wideSearch.starts,
    }),
    ...(wideSearch.starts.by === 'grid'
      ? [of('number', [...place, 'points'], 'Points for each actuator')]
      : wideSearch.starts.by === 'spread'
        ? [of('number', [...place, 'count'], 'Number of points')]
        : []),
    ...visit.flatMap((field) =>
      fieldsOfLaw(field, ['wideSearch', 'visit', field.name], undefined, ['actuators', 0, 'channel']),
    ),
  ];
}

const firstUnit = { of: ['actuators', 0, 'channel'] };

/** When the Seek ends. */
export function endSection({ parameters }: Seek): StepField[] {
  const isOne = parameters.actuators.length === 1;
  return [
    of('number', ['end', 'afterS'], 'Ends after', { unit: 's' }),
    of('presence', ['end', 'whenConverged'], 'Ends earlier when converged', {
      whenOn: { band: 1, forS: 60 },
    }),
    ...(parameters.end.whenConverged === null
      ? []
      : [
          of('number', ['end', 'whenConverged', 'band'], 'Converged within, peak to peak', {
            unit: firstUnit,
            help: `Of the estimate, averaged over whole dither periods.${isOne ? '' : ' For the first actuator; for the others in proportion to their dither.'}`,
          }),
          of('number', ['end', 'whenConverged', 'forS'], 'Converged for', { unit: 's' }),
        ]),
    of('optional-expression', ['end', 'when'], 'Ends earlier when', { help: 'Empty: never by a condition.' }),
    of('number', ['invalidForS'], 'Gives up when invalid for', {
      unit: 's',
      help: 'Until then it waits at the last good point.',
    }),
  ];
}
