import { ditherConflicts, ditherLines, type DitherLaw, type DitherLine } from '../../dither/dither-lines.js';
import type { SeekingLawId } from '../../seeking/seeking-laws.js';

/** Which conditions the dithers of a law have to meet among each other. */
export function ditherLawOf(id: SeekingLawId): DitherLaw {
  return id === 'newton' ? 'newton' : 'gradient';
}

/** Corner of the filter on the gradient where a law has no low-pass of its own, of the dither frequency. */
const usualLowPassRatio = 0.2;

/**
 * Least distance of two lines of the dithers, Hz: what lies nearer passes the filter on the gradient of the slowest
 * dither.
 */
export function ditherSpacingHz(lowestHz: number, lowPassRatio: number | null): number {
  return Math.min(lowPassRatio ?? usualLowPassRatio, 1) * lowestHz;
}

/** Two lines of several dithers that meet, e.g. `2·airTrim` and `fuelTrim`. */
export interface DitherMeeting {
  first: string;
  second: string;
  /** Hz. */
  apartHz: number;
  /** The last of the actuators that take part, from 0. */
  actuator: number;
}

/**
 * Lines that come closer than `apartHz`, by the conditions of the law.
 *
 * @param dithers frequency of each actuator's dither with its name, in their order
 * @param scanHz scans a second: what lies above half of it comes back below
 */
export function ditherMeetings(
  dithers: readonly { name: string; frequencyHz: number }[],
  law: DitherLaw,
  scanHz: number,
  apartHz: number,
): DitherMeeting[] {
  const lines = ditherLines(
    dithers.map(({ frequencyHz }) => frequencyHz),
    law,
    scanHz,
  );
  const named = ({ name }: DitherLine) =>
    name === '0' ? 'zero' : name.replace(/f(\d+)/g, (_, number) => dithers[Number(number) - 1]?.name ?? '?');
  return ditherConflicts(lines, apartHz).map(({ first, second }) => ({
    first: named(first),
    second: named(second),
    apartHz: second.at - first.at,
    actuator: Math.max(
      ...[...`${first.name} ${second.name}`.matchAll(/f(\d+)/g)].map(([, n]) => Number(n) - 1),
    ),
  }));
}
