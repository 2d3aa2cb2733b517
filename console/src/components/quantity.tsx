import Box from '@mui/material/Box';
import { alignNumber } from './format-quantity.js';

interface QuantityProps {
  value: number | null | undefined;
  unit: string;
  decimals: number;
  /** Places before the point, so that a column of quantities lines up; 1 leaves it as short as it is. */
  integerPlaces?: number;
  /** Places after the point that the widest of the column has. */
  fractionPlaces?: number;
  /** Characters kept for the unit, so that a column lines up on its right too. */
  unitPlaces?: number;
  /** The value is from the past: shown grey and said so. */
  isStale?: boolean;
}

/** A number with its unit, aligned on the decimal point. */
export function Quantity({ value, unit, decimals, integerPlaces = 1, unitPlaces, ...rest }: QuantityProps) {
  const { fractionPlaces = decimals, isStale = false } = rest;
  return (
    <Box
      component="span"
      title={isStale ? 'Not fresh: the last value known' : undefined}
      sx={{
        whiteSpace: 'pre',
        color: isStale ? 'text.secondary' : undefined,
        fontStyle: isStale ? 'italic' : undefined,
      }}
    >
      {alignNumber(value, decimals, integerPlaces, fractionPlaces)}
      {(unit !== '' || unitPlaces !== undefined) && (
        <Box
          component="span"
          sx={{
            color: 'text.secondary',
            display: 'inline-block',
            minWidth: unitPlaces && `${unitPlaces + 1}ch`,
          }}
        >
          {` ${unit}`}
        </Box>
      )}
    </Box>
  );
}
