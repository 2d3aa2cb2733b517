import type { EnvelopeContent, Rig } from '@cresthold/shared';
import { plainNumber } from '../../../components/index.js';
import { durationText } from '../interlock-words.js';

type Action = 'warn' | 'pause' | 'stop' | 'trip';

/** One cause and what it does to each actuator. */
export interface CauseRow {
  kind: 'interlock' | 'emergency stop' | 'watch';
  cause: string;
  /** When it acts, in words. */
  when: string;
  action: Action;
  latches: string;
  /** One for each actuator, in the order of the columns. */
  effects: string[];
}

export interface CauseEffectTable {
  actuators: { id: string; title: string }[];
  rows: CauseRow[];
}

const stopWords = ['to rest at once, released', 'ramped to rest, released', 'ramped to rest, held'] as const;

/** The causes of an envelope against its actuators: what an officer prints and signs. */
export function causeEffectTable(content: EnvelopeContent, rig: Rig): CauseEffectTable {
  const titleOf = (id: string) => rig.channels.find((channel) => channel.id === id)?.title ?? id;
  const effectsOf = (action: Action) => content.limits.map((limit) => effectText(action, limit, rig));
  const trip = (kind: CauseRow['kind'], cause: string, when: string): CauseRow => ({
    ...{ kind, cause, when, action: 'trip', latches: 'until reset' },
    effects: effectsOf('trip'),
  });
  const interlocks = content.interlocks.map(({ title, condition, delayS, action, isLatching }): CauseRow => ({
    kind: 'interlock',
    cause: title,
    when: `${condition}${delayS > 0 ? ` for ${durationText(delayS)}` : ''}, or an input that is not good`,
    action,
    latches: action === 'trip' ? 'until reset' : isLatching ? 'until acknowledged' : 'no',
    effects: effectsOf(action),
  }));
  const stops = content.emergencyStopInputs.map(({ channel, title, pressedWhen }) =>
    trip(
      'emergency stop',
      title,
      `${titleOf(channel)} reads ${pressedWhen === 'zero' ? '0' : 'anything but 0'}, or is not known in motion`,
    ),
  );
  const pressed = trip('emergency stop', 'Emergency stop of this software', 'pressed by anyone signed in');
  return {
    actuators: content.limits.map(({ channel }) => ({ id: channel, title: titleOf(channel) })),
    rows: [pressed, ...stops, ...interlocks, ...watches(content, titleOf, trip)],
  };
}

function watches(
  content: EnvelopeContent,
  titleOf: (id: string) => string,
  trip: (kind: CauseRow['kind'], cause: string, when: string) => CauseRow,
): CauseRow[] {
  const stale = content.staleness.map(({ channel, afterS }) =>
    trip('watch', `${titleOf(channel)} is stale`, `no good value for over ${durationText(afterS)}`),
  );
  const readBacks = content.limits.map(({ channel, readBackTolerance, readBackWithinS }) =>
    trip(
      'watch',
      `${titleOf(channel)} does not follow`,
      `read back more than ${plainNumber(readBackTolerance)} off for over ${durationText(readBackWithinS)}`,
    ),
  );
  const late = `${content.overrunLimit} scans in a row over one period late`;
  const silent = `nothing heard for over ${durationText(content.serverSilenceS)}`;
  const rest = [
    trip('watch', 'Late scans', late),
    trip('watch', 'Server silent', silent),
    trip('watch', 'Connection lost', 'any connection of the rig is down'),
  ];
  if (!content.heartbeat) return [...stale, ...readBacks, ...rest];
  const beat = `${titleOf(content.heartbeat.channel)} is counted up every ${durationText(content.heartbeat.periodS)}`;
  const watchdog: CauseRow = {
    ...trip('watch', 'Heartbeat stands still', `${beat}; it stops with this software`),
    effects: content.limits.map(() => 'by the rig’s own watchdog'),
    latches: 'by the rig',
  };
  return [...stale, ...readBacks, ...rest, watchdog];
}

function effectText(action: Action, limit: EnvelopeContent['limits'][number], rig: Rig): string {
  if (action === 'warn') return 'nothing; said to the technician';
  if (action === 'pause') return 'the run pauses; held where it is';
  const unit = rig.channels.find(({ id }) => id === limit.channel)?.unit ?? '';
  const order = `order ${limit.stopOrder}`;
  return `category ${limit.stopCategory}, ${order}: ${stopWords[limit.stopCategory]} at ${plainNumber(limit.rest)} ${unit}`.trim();
}
