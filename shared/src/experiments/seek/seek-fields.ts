import type { DitherKind } from '../../seeking/seeking-law.js';
import { seekingLaws, type SeekingLawId } from '../../seeking/seeking-laws.js';
import { axisFields, type LawField } from './law-form.js';
import type { SeekActuator } from './seek-parameters.schema.js';

/** A number that a law wants for each actuator, and where the step keeps it. */
export interface SeekActuatorField extends LawField {
  place: readonly ['amplitude' | 'periodS' | 'phaseDeg' | 'gain' | 'speedMax'] | readonly ['own', string];
}

type Common = 'amplitude' | 'periodS' | 'phaseDeg' | 'gain' | 'speedMax';

/** What the step calls parameters that several laws have; it gives phases in degrees and every period in seconds. */
const common: Record<string, Common> = {
  amplitude: 'amplitude',
  periodS: 'periodS',
  scansPerPeriod: 'periodS',
  phaseRad: 'phaseDeg',
  gain: 'gain',
  speedMax: 'speedMax',
};

/** The box is the step's own: that of a law holds dither and estimate together. */
const ofTheStep = new Set(['min', 'max', 'dither']);

/** What a law takes for each actuator beside channel, box and dither, in the order of its schema. */
export function seekActuatorFields(id: SeekingLawId): SeekActuatorField[] {
  return axisFields(id)
    .filter(({ name }) => !ofTheStep.has(name))
    .map((field) => {
      const place = common[field.name];
      return {
        ...inUnitsOfTheStep(field),
        place: place ? ([place] as const) : (['own', field.name] as const),
      };
    });
}

function inUnitsOfTheStep(field: LawField): LawField {
  if (field.name === 'phaseRad') return { ...field, unit: '°' };
  if (field.name !== 'scansPerPeriod') return field;
  const inSeconds = axisFields('gradient').find(({ name }) => name === 'periodS');
  return inSeconds ? { ...inSeconds, name: field.name } : field;
}

/** The value that a law's field has for an actuator; undefined where none was given. */
export function actuatorValue(actuator: SeekActuator, { place }: SeekActuatorField) {
  const [first, second] = place;
  return first === 'own' ? actuator.own[second] : actuator[first];
}

/** The name of such a field in faults: `amplitude`, `own.curvature`. */
export const actuatorFieldName = ({ place }: SeekActuatorField): string => place.join('.');

/** Dithers that a law lets choose from; a single one where it has its own. */
export function ditherChoices(id: SeekingLawId): readonly DitherKind[] {
  return seekingLaws[id].ditherKinds;
}

export function ditherOf(id: SeekingLawId, { dither }: Pick<SeekActuator, 'dither'>): DitherKind {
  return dither ?? seekingLaws[id].ditherKinds[0] ?? 'sine';
}

/** Laws that dither periodically; the others dwell on points that they try. */
export function isPeriodic(id: SeekingLawId): boolean {
  return axisFields(id).some(({ name }) => common[name] === 'periodS');
}

/** By how much a law asks for more and less than its estimate, as a share of the amplitude. */
export function ditherShare(id: SeekingLawId, dither: DitherKind): 0 | 1 {
  // Perturb and observe steps with the estimate itself, and measured ripple is the plant's own.
  return id === 'perturb-observe' || dither === 'measured' ? 0 : 1;
}
