import type { ActuatorLimit } from '../../envelopes/envelope.schema.js';
import { seekingLaws } from '../../seeking/seeking-laws.js';
import { gridStarts, spreadStarts, type StartBox } from '../../seeking/spread-starts.js';
import { visitSchema, type Visit } from '../../seeking/wide-search.js';
import type { Evaluated } from '../seek/expression-tree.js';
import { lawFields } from '../seek/law-form.js';
import { actuatorValue, ditherOf, ditherShare, seekActuatorFields } from '../seek/seek-fields.js';
import type { SeekActuator, SeekParameters } from '../seek/seek-parameters.schema.js';

/** Share of an actuator's range below which a dither is rounding. */
const amplitudeShareMin = 1e-9;

/** Parameters of a Seek with every expression evaluated. */
export type SeekNumbers = Evaluated<SeekParameters>;

export interface SeekSetup {
  /** What the law takes, judged by its schema. */
  parameters: object;
  visit: Visit | null;
}

interface Axis {
  /** What the law takes for this actuator. */
  parameters: Record<string, unknown>;
  /** Where the estimate may go, actuator unit. */
  box: StartBox[number];
}

/**
 * Parameters of the law: the box is the step's, narrowed so that estimate and dither together stay within
 * the envelope.
 *
 * @param scanS nominal time between two scans, s
 * @returns the parameters, or why there is nothing to seek with
 */
export function setUpSeek(
  numbers: SeekNumbers,
  limitOf: (channel: string) => ActuatorLimit | undefined,
  scanS: number,
): SeekSetup | string {
  const { law, constraint, wideSearch } = numbers;
  // What the schema says of an actuator holds for its numbers as well.
  const actuators = numbers.actuators as SeekActuator[];
  const axes: Axis[] = [];
  for (const actuator of actuators) {
    const axis = axisOf(numbers, actuator, limitOf(actuator.channel), scanS);
    if (typeof axis === 'string') return axis;
    axes.push(axis);
  }
  if (law.id === 'constrained' && constraint === null)
    return 'There is nothing that the law could constrain.';
  if (constraint !== null && !Number.isFinite(constraint.bound))
    return 'The bound of the constraint is no number.';
  const wanted = { ...(law.parameters as object), axes: axes.map(({ parameters }) => parameters) };
  const outcome = seekingLaws[law.id].parametersSchema.safeParse(wanted);
  if (!outcome.success) return whyRefused(numbers, outcome.error.issues[0]);
  const visit = wideSearch
    ? visitOf(
        wideSearch,
        axes.map(({ box }) => box),
      )
    : null;
  return typeof visit === 'string' ? visit : { parameters: outcome.data, visit };
}

function axisOf(
  { law }: SeekNumbers,
  actuator: SeekActuator,
  limit: ActuatorLimit | undefined,
  scanS: number,
): Axis | string {
  const { channel } = actuator;
  if (!limit) return `"${channel}" has no limit in the envelope in force.`;
  const dither = ditherOf(law.id, actuator);
  const parameters: Record<string, unknown> = { dither };
  for (const field of seekActuatorFields(law.id)) {
    const value = actuatorValue(actuator, field) as number | null | undefined;
    if (Number.isNaN(value)) return `${named(field.title, channel)} came out as no number.`;
    if (value !== undefined && (value !== null || field.isNullable)) {
      parameters[field.name] = asTheLawSays(field.name, value, scanS);
    }
  }
  const amplitude = parameters['amplitude'] as number;
  const reach = ditherShare(law.id, dither) * amplitude;
  const fault =
    amplitudeFault(channel, amplitude, reach, limit) ?? speedFault(actuator, dither, reach, limit);
  if (fault !== null) return fault;
  const min = Math.max((actuator.min as number | null) ?? -Infinity, limit.min + reach);
  const max = Math.min((actuator.max as number | null) ?? Infinity, limit.max - reach);
  // Written so that an end which is no number leaves no room either.
  if (!(min <= max))
    return `With the dither kept inside the envelope no room is left to seek in for "${channel}".`;
  // The law keeps the estimate off its box by the amplitude.
  const box = { min: Math.max(min - reach, limit.min), max: Math.min(max + reach, limit.max) };
  return { parameters: { ...parameters, ...box }, box: { min, max } };
}

const named = (title: string, channel: string) => `The parameter "${title}" of "${channel}"`;

function asTheLawSays(name: string, value: number | null, scanS: number): number | null {
  if (value === null) return null;
  if (name === 'phaseRad') return (value * Math.PI) / 180;
  return name === 'scansPerPeriod' ? value / scanS : value;
}

function amplitudeFault(
  channel: string,
  amplitude: number,
  reach: number,
  limit: ActuatorLimit,
): string | null {
  if (!(amplitude > 0))
    return `The dither amplitude of "${channel}" must be a number above zero, not ${amplitude}.`;
  if (amplitude < (limit.max - limit.min) * amplitudeShareMin) {
    return `The dither amplitude ${amplitude} is too small for "${channel}" to show.`;
  }
  if (reach > limit.ditherAmplitudeMax) {
    return `The dither amplitude ${amplitude} of "${channel}" is above the ${limit.ditherAmplitudeMax} of the envelope.`;
  }
  return null;
}

/** A sine that is faster than its actuator would be cut by the guard all the time, and no sine any more. */
function speedFault(
  actuator: SeekActuator,
  dither: string,
  reach: number,
  limit: ActuatorLimit,
): string | null {
  const periodS = actuator.periodS as number | null;
  if (dither !== 'sine' || periodS === null || !(periodS > 0)) return null;
  const speed = (2 * Math.PI * reach) / periodS;
  if (speed <= limit.slewPerS) return null;
  return `The dither of "${actuator.channel}" would move at up to ${Number(speed.toPrecision(4))} a second, above the slew limit of ${limit.slewPerS}.`;
}

interface Issue {
  path: PropertyKey[];
  message: string;
}

/** A refusal of the law's schema in words: which parameter, of which actuator. */
function whyRefused({ law, actuators }: SeekNumbers, issue: Issue | undefined): string {
  const [first = '', index, name = ''] = issue?.path.map(String) ?? [];
  const message = issue?.message ?? 'The law cannot take these parameters.';
  const isAxis = first === 'axes' && index !== undefined;
  const fields = isAxis ? seekActuatorFields(law.id) : lawFields(law.id);
  const title =
    fields.find((field) => field.name === (isAxis ? name : first))?.title ?? (isAxis ? name : first);
  if (!isAxis) return `The parameter "${title}" of the law: ${message}`;
  return `${named(title, actuators[Number(index)]?.channel ?? '')}: ${message}`;
}

/** Points that a wide search visits at most. */
export const visitedPointsMax = 10_000;

function visitOf({ starts, visit }: NonNullable<SeekNumbers['wideSearch']>, box: StartBox): Visit | string {
  if (starts.by === 'grid' && starts.points ** box.length > visitedPointsMax) {
    return `The grid of the wide search has more than ${visitedPointsMax} points.`;
  }
  const points =
    starts.by === 'grid'
      ? gridStarts(box, starts.points)
      : starts.by === 'spread'
        ? spreadStarts(box, starts.count)
        : (starts.points as number[][]);
  const outcome = visitSchema.safeParse({ ...visit, starts: points });
  if (outcome.success) return outcome.data;
  const [issue] = outcome.error.issues;
  return `The wide search cannot be made (${issue?.path.join('.')}): ${issue?.message}`;
}
