import { benchOpening, fillPulse, pulseEnergies, type PulseEnergies } from './pulser-physics.js';

/** Points of the pulse trace, and lifetimes of the cavity between two of them. */
export const tracePoints = 512;
export const pointEvery = 0.5;

const first = 1;
const last = 6;
const step = 0.02;

let table: readonly PulseEnergies[] | null = null;

/** Energies of the bench's pulses over the inversion; worked out once for each process. */
function energies(): readonly PulseEnergies[] {
  if (table) return table;
  const points = new Float64Array(tracePoints);
  table = Array.from({ length: Math.round((last - first) / step) + 1 }, (_, i) => {
    fillPulse(first + i * step, benchOpening, pointEvery, points);
    return pulseEnergies(points, pointEvery);
  });
  return table;
}

/** What a pulse of the bench carries at an inversion; below threshold nothing. @param r inversion over threshold */
export function energiesAt(r: number): PulseEnergies {
  if (!(r > first)) return { total: 0, main: 0 };
  const rows = energies();
  const place = Math.min((r - first) / step, rows.length - 1);
  const below = rows[Math.floor(place)] ?? { total: 0, main: 0 };
  const above = rows[Math.floor(place) + 1] ?? below;
  const share = place - Math.floor(place);
  return {
    total: below.total + share * (above.total - below.total),
    main: below.main + share * (above.main - below.main),
  };
}

/** Clean energy: what is in the main pulse less what is beside it, in emptied thresholds. */
export function cleanAt(r: number): number {
  const { total, main } = energiesAt(r);
  return 2 * main - total;
}
