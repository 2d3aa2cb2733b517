import { useState } from 'react';
import Box from '@mui/material/Box';
import TextField from '@mui/material/TextField';
import { compileConversion, type Channel, type Conversion } from '@cresthold/shared';
import { plainNumber, roundScale } from '../../components/index.js';
import { usePaper } from '../../theme/index.js';
import { numberOf } from './calibration-draft.js';
import { rawUnit } from './conversion-text.js';
import { previewCurve } from './preview-curve.js';

/** Taken where a channel measures the cold junction, °C. */
const assumedColdC = 20;

interface ConversionPreviewProps {
  conversion: Conversion;
  channel: Channel;
}

/** What a conversion makes of raw values: its curve, and one value of one's own choice. */
export function ConversionPreview({ conversion, channel }: ConversionPreviewProps) {
  const [typed, setTyped] = useState('');
  const junction = conversion.kind === 'thermocouple' ? conversion.coldJunction : null;
  const coldC = junction && 'celsius' in junction ? junction.celsius : assumedColdC;
  const curve = previewCurve(conversion, channel.display, coldC);
  const raw = typed.trim() === '' ? (curve.raws[50] ?? 0) : numberOf(typed);
  const value = compileConversion(conversion)(raw, coldC);
  const reads = Number.isFinite(value)
    ? `reads ${plainNumber(value)} ${channel.unit}`
    : 'is outside what this covers: the reading is bad';
  return (
    <Box sx={{ display: 'grid', gap: 1, gridTemplateColumns: 'minmax(0, 1fr)' }}>
      <Curve
        curve={curve}
        unit={channel.unit}
        rawLabel={`raw ${rawUnit(conversion.kind)}`.trim()}
        at={{ raw, value }}
      />
      <Box sx={{ display: 'flex', gap: 1.5, alignItems: 'center', flexWrap: 'wrap' }}>
        <TextField
          label="Try a raw value"
          value={typed}
          placeholder={plainNumber(raw)}
          onChange={(event) => setTyped(event.target.value)}
          slotProps={{
            htmlInput: { inputMode: 'decimal', autoComplete: 'off' },
            inputLabel: { shrink: true },
          }}
          sx={{ width: '11rem' }}
        />
        <span role="status">
          raw {Number.isFinite(raw) ? `${plainNumber(raw)} ${rawUnit(conversion.kind)}` : '—'} {reads}
        </span>
      </Box>
      {junction && 'channel' in junction && (
        <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
          Drawn with the cold junction at {assumedColdC} °C; in a scan it is what {junction.channel} reads.
        </Box>
      )}
    </Box>
  );
}

interface CurveProps {
  curve: { raws: number[]; values: number[] };
  unit: string;
  rawLabel: string;
  at: { raw: number; value: number };
}

const width = 520;
const height = 220;
const left = 64;
const bottom = 40;

function Curve({ curve, unit, rawLabel, at }: CurveProps) {
  const paper = usePaper();
  const x = roundScale(curve.raws, 6);
  const y = roundScale(curve.values, 4);
  const px = (raw: number) => left + x.at(raw) * (width - left - 12);
  const py = (value: number) => height - bottom - y.at(value) * (height - bottom - 12);
  const drawn = curve.raws.flatMap((raw, index) => {
    const value = curve.values[index] ?? NaN;
    return Number.isFinite(value) ? [`${px(raw).toFixed(1)} ${py(value).toFixed(1)}`] : [];
  });
  const isShown = Number.isFinite(at.value) && at.raw >= x.min && at.raw <= x.max;
  return (
    <Box
      component="svg"
      viewBox={`0 0 ${width} ${height}`}
      role="img"
      aria-label={`Curve from raw ${plainNumber(curve.raws[0] ?? 0)} to ${plainNumber(curve.raws.at(-1) ?? 0)}`}
      sx={{ width: '100%', maxWidth: width, fontSize: 11 }}
    >
      <g fill={paper.inkSoft}>
        {x.ticks.map((tick) => (
          <g key={tick}>
            <path d={`M${px(tick)} 12V${height - bottom}`} stroke={paper.grid} />
            <text x={px(tick)} y={height - bottom + 15} textAnchor="middle">
              {plainNumber(tick)}
            </text>
          </g>
        ))}
        {y.ticks.map((tick) => (
          <g key={tick}>
            <path d={`M${left} ${py(tick)}H${width - 12}`} stroke={paper.grid} />
            <text x={left - 6} y={py(tick) + 4} textAnchor="end">
              {plainNumber(tick)}
            </text>
          </g>
        ))}
        <text x={width / 2} y={height - 6} textAnchor="middle">
          {rawLabel}
        </text>
        <text x={left} y={9}>
          {unit}
        </text>
      </g>
      {drawn.length > 1 && (
        <path d={`M${drawn.join('L')}`} fill="none" stroke={paper.ink} strokeWidth="1.5" />
      )}
      {isShown && <circle cx={px(at.raw)} cy={py(at.value)} r="4" fill={paper.ink} />}
    </Box>
  );
}
