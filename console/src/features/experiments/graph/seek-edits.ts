import {
  DomainError,
  actuatorValue,
  ditherLawOf,
  ditherSpacingHz,
  isPeriodic,
  lawFields,
  planDithers,
  seekActuatorFields,
  type LawField,
  type LawParameter,
  type SeekActuator,
  type SeekingLawId,
  type StepOf,
} from '@cresthold/shared';

type Seek = StepOf<'seek'>;

/** A period that most plants of a bench can follow, s; a start for a person, not a result. */
const usualPeriodS = 5;
const usualDwellS = 5;

/**
 * The Seek with another law. What the new law has under the same name is kept; the rest begins with what the law has
 * for it, or with a first guess.
 */
export function withLaw(step: Seek, id: SeekingLawId): Seek {
  const { parameters } = step;
  const before = parameters.law.parameters;
  const law = Object.fromEntries(
    lawFields(id).map((field) => [field.name, before[field.name] ?? firstValue(field, parameters.actuators)]),
  );
  return {
    ...step,
    parameters: {
      ...parameters,
      law: { id, parameters: law },
      actuators: parameters.actuators.map((actuator) => fitted(actuator, id)),
      constraint:
        id === 'constrained' ? (parameters.constraint ?? { expression: 'objective', bound: 0 }) : null,
    },
  };
}

/** Rates that a law has no value for: a twentieth of the slowest dither, which leaves averaging its time. */
const rateShare = 0.05;

function firstValue(
  { name, type, initial, options, fields }: LawField,
  actuators: readonly SeekActuator[],
): LawParameter {
  if (type === 'group') {
    if (initial === null) return null;
    return Object.fromEntries(fields.map((field) => [field.name, firstValue(field, actuators)]));
  }
  if (initial !== undefined) return initial as LawParameter;
  if (type === 'choice') return options[0] ?? '';
  if (name === 'dwellS') return usualDwellS;
  const periodsS = actuators.map(({ periodS }) => (typeof periodS === 'number' ? periodS : usualPeriodS));
  return Number(((rateShare * 2 * Math.PI) / Math.max(...periodsS)).toPrecision(2));
}

/** The actuator with a first value for what the law needs and has not. */
export function fitted(actuator: SeekActuator, id: SeekingLawId): SeekActuator {
  const next = { ...actuator, own: { ...actuator.own } };
  for (const field of seekActuatorFields(id)) {
    if (actuatorValue(next, field) !== undefined && actuatorValue(next, field) !== null) continue;
    const [first, second] = field.place;
    if (first === 'own') next.own[second] = field.isNullable ? null : ownStart(field);
    else if (first === 'periodS') next.periodS = usualPeriodS;
    else if (first === 'gain') next.gain = 1;
  }
  return next;
}

const ownStart = ({ schema }: LawField) => (schema.safeParse(0).success ? 0 : 1);

export type Planned = { isOk: true; step: Seek } | { isOk: false; message: string };

/** Digits that a planned period keeps: few to read, enough for its lines to stay where they were planned. */
const periodDigits = 9;

/**
 * The Seek with dither periods that do not meet, the slowest of today at the slow end; the order of the actuators by
 * their periods is kept.
 *
 * @param scanS time between two scans, s
 */
export function withPlannedDithers(step: Seek, scanS: number): Planned {
  const { law, actuators } = step.parameters;
  const periods = actuators.map(({ periodS }) =>
    typeof periodS === 'number' && periodS > 0 ? periodS : null,
  );
  const lowestHz = 1 / Math.max(...periods.map((periodS) => periodS ?? 0), 10 * scanS);
  const lowPass = law.parameters['lowPassRatio'];
  try {
    const { periodsS } = planDithers({
      actuators: actuators.length,
      law: ditherLawOf(law.id),
      scanS,
      lowestHz,
      highestHz: 1 / (10 * scanS),
      apartHz: ditherSpacingHz(lowestHz, typeof lowPass === 'number' ? lowPass : null),
    });
    const slowestFirst = actuators.map((_, i) => i).sort((a, b) => (periods[b] ?? 0) - (periods[a] ?? 0));
    const planned = actuators.map((actuator, i) => ({
      ...actuator,
      periodS: Number((periodsS[slowestFirst.indexOf(i)] ?? NaN).toPrecision(periodDigits)),
    }));
    return { isOk: true, step: { ...step, parameters: { ...step.parameters, actuators: planned } } };
  } catch (error) {
    if (error instanceof DomainError) return { isOk: false, message: error.message };
    throw error;
  }
}

/** Whether there are dithers whose periods could be planned. */
export function canPlanDithers({ parameters }: Seek): boolean {
  return isPeriodic(parameters.law.id) && parameters.actuators.length > 1;
}
