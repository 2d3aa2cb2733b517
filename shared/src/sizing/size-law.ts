import { DomainError } from '../errors/domain-error.js';
import { seekingLaws, type SeekingLawId } from '../seeking/seeking-laws.js';
import type { LawSize } from './law-size.types.js';
import { loopKinds, type PeriodicLawId } from './loop-kinds.js';
import { sizePeriodicLaw } from './size-periodic-law.js';
import { sizePerturbObserve } from './size-perturb-observe.js';
import { sizeSpsa } from './size-spsa.js';
import {
  checkedForSizing,
  sizingDemandsSchema,
  sizingPlantSchema,
  type CheckedPlant,
  type SizingDemands,
  type SizingPlant,
} from './sizing-plant.schema.js';

/**
 * Sizes any seeking law from what identification knows of the plant: a complete set of parameters, with what the
 * law will do with them. How each law is sized stands at `sizePeriodicLaw`, `sizeSpsa` and `sizePerturbObserve`.
 *
 * @throws analysis.invalid-input where what is given has faults, where no amplitude will do, or where no dithers can
 * be planned; with the field to change
 * @example
 * sizeLaw('newton', { scanS: 0.1, noise: { sigma: 0 }, curvature: [[2]], actuators: [{ min: -5, max: 5 }] }, { lossAllowed: 0.005 }).amplitudes // [0.1]
 */
export function sizeLaw<Id extends SeekingLawId>(
  lawId: Id,
  plant: SizingPlant,
  demands: SizingDemands,
): LawSize<Id> {
  const known = checkedForSizing(sizingPlantSchema, plant);
  const { actuatorsMax } = seekingLaws[lawId];
  if (known.actuators.length > actuatorsMax) {
    throw fault('actuators', `This law steers ${actuatorsMax} actuators at most: seek with fewer at once.`);
  }
  const wanted = checkedForSizing(sizingDemandsSchema, demands);
  if (wanted.dither === 'measured') requireRipple(lawId, known);
  const size: LawSize =
    lawId === 'spsa'
      ? sizeSpsa(known, wanted)
      : lawId === 'perturb-observe'
        ? sizePerturbObserve(known, wanted)
        : sizePeriodicLaw(lawId, known, wanted);
  return size as LawSize<Id>;
}

function fault(field: string, message: string): DomainError {
  return new DomainError('analysis.invalid-input', message, [{ field, message }]);
}

function requireRipple(lawId: SeekingLawId, { actuators }: CheckedPlant): void {
  if (!rippleLaws.includes(lawId)) {
    throw fault(
      'dither',
      `This law injects its own dither; with the plant's ripple work: ${rippleLaws.join(', ')}.`,
    );
  }
  const missing = actuators.findIndex(({ ripple }) => ripple === null);
  if (missing === -1) return;
  throw fault(
    `actuators.${missing}.ripple`,
    'Measure amplitude and period of the ripple of this actuator first.',
  );
}

/** Laws that can work with the plant's own ripple when they are sized by `sizeLaw`. */
export const rippleLaws: readonly SeekingLawId[] = (Object.keys(loopKinds) as PeriodicLawId[]).filter(
  (id) => id !== 'newton' && id !== 'discrete' && id !== 'bounded-rate',
);
