import { backlashWidth, type SweepPair } from '../../identification/backlash.js';
import { noEstimate, type Estimate } from '../../signals/estimate.js';
import type { SurveyPlaces } from './survey-places.js';

/** Fewest places of a line for it to tell the backlash. */
const placesMin = 6;
/** Places of a line and squares of places in all that are worked with: more takes too long within a scan. */
const placesMax = 20;
const workMax = 400;

/**
 * Width of the backlash of one actuator of a survey, from its ways up and down; of a survey over two from a few lines
 * across the map. Of a line with many places neighbours are averaged.
 *
 * @returns unit of the actuator; NaN where it did not go up and down, or the map does not say
 */
export function surveyBacklash(places: SurveyPlaces, actuator: number): Estimate {
  if (!places.isUpAndDown(actuator)) return noEstimate();
  const lines = linesOf(places, actuator).filter(({ values }) => values.length >= placesMin);
  const work = Math.max(...lines.map(({ values }) => values.length ** 2));
  const used = spread(lines, Math.max(1, Math.floor(workMax / work)));
  return used.length > 0 ? backlashWidth(used) : noEstimate();
}

function linesOf(places: SurveyPlaces, actuator: number): SweepPair[] {
  if (places.ranges.length === 1) return [lineOf(places, actuator, (index) => [index])];
  return places
    .rising(1 - actuator)
    .map((other) => lineOf(places, actuator, (index) => (actuator === 0 ? [index, other] : [other, index])));
}

type Line = { values: number[]; up: number[]; down: number[] };

function lineOf(places: SurveyPlaces, actuator: number, cellOf: (index: number) => number[]): Line {
  const good = places.rising(actuator).flatMap((index) => {
    const [up, down] = (['up', 'down'] as const).map((branch) => {
      const branches = places.ranges.map((_, axis) => (axis === actuator ? branch : undefined));
      return places.sample(cellOf(index), branches);
    });
    const isGood = up?.isValid === true && down?.isValid === true;
    return isGood ? [{ value: places.target(actuator, index), up: up.objective, down: down.objective }] : [];
  });
  const size = Math.ceil(good.length / placesMax) || 1;
  const groups = Array.from({ length: Math.floor(good.length / size) }, (_, k) =>
    good.slice(k * size, (k + 1) * size),
  );
  const means = (name: 'value' | 'up' | 'down') =>
    groups.map((group) => group.reduce((sum, one) => sum + one[name], 0) / group.length);
  return { values: means('value'), up: means('up'), down: means('down') };
}

/** So many of a list at most, evenly from its one end to the other. */
function spread<T>(list: readonly T[], most: number): T[] {
  if (list.length <= most) return [...list];
  return Array.from(
    { length: most },
    (_, k) => list[Math.round(((k + 0.5) * list.length) / most - 0.5)] as T,
  );
}
