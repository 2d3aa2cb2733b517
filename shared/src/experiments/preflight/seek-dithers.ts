import type { StepOf } from '../experiment.schema.js';
import { ditherLawOf, ditherMeetings, ditherSpacingHz } from '../seek/seek-dithers.js';
import type { PreflightCase } from './fault-list.js';
import { knownPeriodsS, lawNumber } from './seek-timing.js';

type Seek = StepOf<'seek'>;

/** Lines that are nearer than this share of the lowest dither frequency are one: no filter parts them. */
const sameShare = 0.01;
/** Meetings of one step that are listed; the others go with them. */
const listedMax = 6;

/** Dithers of several actuators that the law would take for each other. */
export function checkSeekDithers(c: PreflightCase, step: Seek): void {
  const dithers = knownPeriodsS(step).flatMap((periodS, index) => {
    const name = step.parameters.actuators[index]?.channel ?? '';
    return periodS === null ? [] : [{ name, frequencyHz: 1 / periodS, index }];
  });
  if (dithers.length < 2) return;
  const lowestHz = Math.min(...dithers.map(({ frequencyHz }) => frequencyHz));
  const apartHz = ditherSpacingHz(lowestHz, lawNumber(step, 'lowPassRatio'));
  const law = ditherLawOf(step.parameters.law.id);
  // A hair less, so that what was planned with just this distance passes.
  const found = ditherMeetings(dithers, law, 1000 / c.rig.periodMs, apartHz * (1 - 1e-6));
  for (const { first, second, apartHz: distanceHz, actuator } of found.slice(0, listedMax)) {
    const field = `parameters.actuators[${dithers[actuator]?.index ?? 0}].periodS`;
    const advice = 'choose other periods, or let them be planned';
    if (distanceHz <= sameShare * lowestHz) {
      const message = `The frequencies of ${first} and ${second} meet: the law takes one for the other; ${advice}.`;
      c.faults.error('dithers-meet', step.id, field, message);
    } else {
      const apart = `${Number(distanceHz.toPrecision(2))} Hz apart, nearer than the ${Number(apartHz.toPrecision(2))} Hz that the low-pass lets through`;
      c.faults.warning('dithers-near', step.id, field, `${first} and ${second} are ${apart}: ${advice}.`);
    }
  }
}
