import { compileConversion, emfOf, type Conversion } from '@cresthold/shared';

export interface PreviewCurve {
  raws: number[];
  values: number[];
}

const points = 101;
/** Resistances at −200 and 850 °C over that at 0 °C (IEC 60751). */
const platinumRatios = [0.1852, 3.9048] as const;

/**
 * The curve of a conversion over what it covers, or over what the channel shows.
 *
 * @param display range that the channel shows, in its unit
 * @param coldC assumed temperature of the cold junction, °C
 */
export function previewCurve(
  conversion: Conversion,
  display: { min: number; max: number },
  coldC: number,
): PreviewCurve {
  const [from, to] = rangeOf(conversion, display, coldC);
  const convert = compileConversion(conversion);
  const raws = Array.from({ length: points }, (_, index) => from + ((to - from) * index) / (points - 1));
  return { raws, values: raws.map((raw) => convert(raw, coldC)) };
}

function rangeOf(
  conversion: Conversion,
  display: { min: number; max: number },
  coldC: number,
): readonly [number, number] {
  switch (conversion.kind) {
    case 'linear': {
      const ends = [display.min, display.max].map((value) => (value - conversion.offset) / conversion.gain);
      return [Math.min(...ends), Math.max(...ends)];
    }
    case 'polynomial':
      return [conversion.from, conversion.to];
    case 'table':
      return [conversion.points[0]?.raw ?? 0, conversion.points.at(-1)?.raw ?? 1];
    case 'platinum':
      return [platinumRatios[0] * conversion.r0Ohm, platinumRatios[1] * conversion.r0Ohm];
    case 'thermocouple': {
      const emf = (celsius: number) => emfOf(conversion.type, celsius) - emfOf(conversion.type, coldC);
      const shown = [emf(display.min), emf(display.max)];
      return shown.every(Number.isFinite) && Number(shown[0]) < Number(shown[1])
        ? [Number(shown[0]), Number(shown[1])]
        : [emf(50), emf(300)];
    }
  }
}
