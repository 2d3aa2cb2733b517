import type { StepOf } from '../experiment.schema.js';
import type { SeekWideSearch } from '../seek/seek-parameters.schema.js';
import { constantOf } from '../step-parameters.js';
import { visitedPointsMax } from '../steps/seek-setup.js';
import type { PreflightCase } from './fault-list.js';
import { checkInside } from './limits.js';

type Seek = StepOf<'seek'>;

/** How far a wide search looks around, against the time that it has. */
export function checkWideSearch(c: PreflightCase, step: Seek): void {
  const { wideSearch, end } = step.parameters;
  if (!wideSearch) return;
  checkStarts(c, step, wideSearch);
  const points = pointsOf(step, wideSearch);
  if (points > visitedPointsMax) {
    const message = `The wide search has ${points} points, ${visitedPointsMax} are the most: take fewer for each actuator.`;
    c.faults.error('search-too-large', step.id, 'parameters.wideSearch.starts', message);
    return;
  }
  const { settleS, seekS, averageS, everyS } = wideSearch.visit;
  const times = [settleS, seekS, averageS].map((time) => constantOf(time));
  if (times.includes(null)) return;
  // The place where it stands is visited first.
  const roundS = (points + 1) * times.reduce<number>((sum, time) => sum + (time ?? 0), 0);
  const lasts = `A round takes ${Number(roundS.toPrecision(3))} s and the moves between its points`;
  if (roundS >= end.afterS) {
    const message = `${lasts}: the step ends before it seeks from the best of them.`;
    c.faults.error('search-too-long', step.id, 'parameters.end.afterS', message);
  }
  const again = everyS === null ? null : constantOf(everyS);
  if (again !== null && again < roundS) {
    const message = `${lasts}: it would look around more than it seeks.`;
    c.faults.warning('search-too-often', step.id, 'parameters.wideSearch.visit.everyS', message);
  }
}

function pointsOf(step: Seek, { starts }: SeekWideSearch): number {
  if (starts.by === 'grid') return starts.points ** step.parameters.actuators.length;
  return starts.by === 'spread' ? starts.count : starts.points.length;
}

function checkStarts(c: PreflightCase, step: Seek, { starts }: SeekWideSearch): void {
  if (starts.by !== 'list') return;
  const { actuators } = step.parameters;
  starts.points.forEach((point, index) => {
    const place = `parameters.wideSearch.starts.points[${index}]`;
    if (point.length !== actuators.length) {
      const message = `This point has ${point.length} values for ${actuators.length} actuators: give one for each.`;
      c.faults.error('search-point', step.id, place, message);
    }
    point.forEach((value, i) => {
      const channel = actuators[i]?.channel;
      if (channel !== undefined) checkInside(c, step, `${place}[${i}]`, channel, value);
    });
  });
}
