import type { ActuatorLimit } from '@cresthold/shared';
import { plainNumber } from '../../components/index.js';

export type MoveInput = { isOk: true; value: number } | { isOk: false; message: string };

/**
 * Reads what was typed as the goal of a manual move. A comma counts as the decimal point.
 *
 * @param unit of the channel, for the message
 */
export function parseMove(text: string, limit: Pick<ActuatorLimit, 'min' | 'max'>, unit: string): MoveInput {
  const cleaned = text.trim().replace(',', '.').replace('\u2212', '-');
  const value = cleaned === '' ? NaN : Number(cleaned);
  if (!Number.isFinite(value)) return { isOk: false, message: 'Enter a number.' };
  if (value < limit.min || value > limit.max) {
    const suffix = unit === '' ? '' : ` ${unit}`;
    return {
      isOk: false,
      message: `Stay within ${plainNumber(limit.min)} to ${plainNumber(limit.max)}${suffix}.`,
    };
  }
  return { isOk: true, value };
}
