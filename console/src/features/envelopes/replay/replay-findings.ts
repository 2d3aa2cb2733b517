import type { Rig, ReplayedActuator, ReplayedInterlock, ReplayReport } from '@cresthold/shared';
import { plainNumber } from '../../../components/index.js';
import { durationText } from '../interlock-words.js';

/** One line of what a draft would have done in a run. */
export interface Finding {
  what: string;
  text: string;
  /** Where to look in the run, s since it began; null where there is no one place. */
  atTS: number | null;
  /** Least distance to acting, with its unit; null where there is none. */
  margin: string | null;
  /** Something would have acted, or could not be judged. */
  isNotable: boolean;
}

const times = (count: number): string => (count === 1 ? 'once' : `${count} times`);

/** What a draft would have done in one run, in words: interlocks, watches, actuators. */
export function replayFindings(report: ReplayReport, rig: Rig): Finding[] {
  const channelOf = (id: string) => rig.channels.find((channel) => channel.id === id);
  const titleOf = (id: string) => channelOf(id)?.title ?? id;
  const stale = report.staleness.map(({ channel, trips, firstTS, oldestS, oldestAtTS }): Finding => ({
    what: `${titleOf(channel)}, freshness`,
    text: trips > 0 ? `stale ${times(trips)}` : 'fresh',
    atTS: firstTS ?? oldestAtTS,
    margin: `oldest ${durationText(oldestS)}`,
    isNotable: trips > 0,
  }));
  const stops = report.emergencyStops.map(({ title, presses, firstTS }): Finding => ({
    what: title,
    text: presses > 0 ? `pressed ${times(presses)}` : 'not pressed',
    atTS: firstTS,
    margin: null,
    isNotable: presses > 0,
  }));
  const { mostInARow, limit, isTrip } = report.overruns;
  const overruns: Finding = {
    what: 'Late scans',
    text: isTrip ? 'trips' : 'no trip',
    atTS: null,
    margin: `${mostInARow} in a row of ${limit}`,
    isNotable: isTrip,
  };
  return [
    ...report.interlocks.map((lock) => interlockFinding(lock, unitOf(rig, lock.marginChannel))),
    ...stops,
    ...stale,
    overruns,
    ...report.actuators.flatMap((actuator) =>
      actuatorFindings(actuator, titleOf(actuator.channel), unitOf(rig, actuator.channel)),
    ),
  ];
}

function interlockFinding(lock: ReplayedInterlock, unit: string): Finding {
  const { title, action, leastMargin, episodes, whyNotJudged } = lock;
  return {
    what: title,
    text: whyNotJudged === null ? interlockText(lock) : `not judged: ${whyNotJudged}`,
    atTS: episodes[0]?.fromTS ?? leastMargin?.atTS ?? null,
    margin: leastMargin && `${plainNumber(leastMargin.value)} ${unit}`.trim(),
    isNotable: whyNotJudged !== null || (lock.acts > 0 && action !== 'warn'),
  };
}

function interlockText(lock: ReplayedInterlock): string {
  const { acts, action, totalS, nearMisses, longestNearMissS, badScans, isTrueAtStart } = lock;
  const parts = [
    acts > 0 ? `${action} ${times(acts)}, ${durationText(totalS)} in all` : 'would not have acted',
    nearMisses > 0 &&
      `unsafe ${times(nearMisses)} for less than its delay, ${durationText(longestNearMissS)} at most`,
    badScans > 0 && `an input was not good in ${badScans} scans`,
    isTrueAtStart && 'unsafe from the first scan',
  ];
  return parts.filter((part) => part !== false).join('; ');
}

function actuatorFindings(actuator: ReplayedActuator, title: string, unit: string): Finding[] {
  const { isLimited, requests, range, slew, dither, readBackTrips, readBackLeastMargin, appliedOutside } =
    actuator;
  if (!isLimited) {
    if (requests === 0) return [];
    const text = `asked for in ${requests} scans, and this envelope has no limit for it`;
    return [{ what: title, text, atTS: null, margin: null, isNotable: true }];
  }
  const line = (name: string, found: typeof range, perS = ''): Finding => ({
    what: `${title}, ${name}`,
    text: found.clips > 0 ? `clipped in ${found.clips} scans` : 'not clipped',
    atTS: found.leastMargin?.atTS ?? null,
    margin: found.leastMargin && `${plainNumber(found.leastMargin.value)} ${unit}${perS}`.trim(),
    isNotable: found.clips > 0,
  });
  const rangeLine = line('range', range);
  if (appliedOutside > 0) rangeLine.text += `; applied values lie outside in ${appliedOutside} scans`;
  const readBack = line('read-back', { clips: readBackTrips, leastMargin: readBackLeastMargin });
  readBack.text = readBackTrips > 0 ? `trips ${times(readBackTrips)}` : 'no trip';
  const lines = [rangeLine, line('slew', slew, '/s'), readBack];
  return dither.leastMargin ? [...lines, line('dither', dither)] : lines;
}

function unitOf(rig: Rig, channel: string | null): string {
  return rig.channels.find(({ id }) => id === channel)?.unit ?? '';
}
