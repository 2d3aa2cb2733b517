import { simpleThreshold, type EnvelopeContent } from '@cresthold/shared';
import type { ChartLevel } from '../../components/strip-chart/index.js';

/** The lines across the chart of a channel: limits of an actuator, thresholds of interlocks. */
export function channelLevels(channelId: string, envelope: EnvelopeContent | undefined): ChartLevel[] {
  const limit = envelope?.limits.find(({ channel }) => channel === channelId);
  const levels: ChartLevel[] = limit
    ? [
        { value: limit.min, label: 'lower limit' },
        { value: limit.max, label: 'upper limit' },
      ]
    : [];
  for (const interlock of envelope?.interlocks ?? []) {
    const threshold = simpleThreshold(interlock.condition);
    if (threshold?.channel === channelId) {
      levels.push({ value: threshold.value, label: `${interlock.action}: ${interlock.title}` });
    }
  }
  return levels;
}
