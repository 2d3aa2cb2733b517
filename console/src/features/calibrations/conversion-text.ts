import type { Conversion } from '@cresthold/shared';
import { plainNumber } from '../../components/index.js';

export const conversionTitles: Record<Conversion['kind'], string> = {
  linear: 'Straight line',
  polynomial: 'Polynomial',
  table: 'Table of points',
  thermocouple: 'Thermocouple (ITS-90)',
  platinum: 'Platinum resistance (IEC 60751)',
};

/** A conversion in a few words. */
export function conversionText(conversion: Conversion): string {
  switch (conversion.kind) {
    case 'linear':
      return `${plainNumber(conversion.gain)} · raw + ${plainNumber(conversion.offset)}`;
    case 'polynomial':
      return `polynomial of order ${conversion.coefficients.length - 1}`;
    case 'table':
      return `table of ${conversion.points.length} points`;
    case 'thermocouple':
      return `thermocouple type ${conversion.type}, cold junction ${junctionText(conversion.coldJunction)}`;
    case 'platinum':
      return `platinum, ${plainNumber(conversion.r0Ohm)} ohm at 0 °C`;
  }
}

type Junction = Extract<Conversion, { kind: 'thermocouple' }>['coldJunction'];

function junctionText(junction: Junction): string {
  return 'celsius' in junction ? `at ${plainNumber(junction.celsius)} °C` : `by channel ${junction.channel}`;
}

/** Unit of the raw value, where the conversion says it. */
export function rawUnit(kind: Conversion['kind']): string {
  return kind === 'thermocouple' ? 'mV' : kind === 'platinum' ? 'ohm' : '';
}
