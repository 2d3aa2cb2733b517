/** Laws whose dithers are planned; `gradient` holds for every law that demodulates with the dithers alone. */
export type DitherLaw = 'gradient' | 'newton';

/** A frequency that the objective answers with, or that a law demodulates at, in steps of the grid. */
export interface DitherLine {
  readonly at: number;
  /** How it comes about, for messages: `f1`, `2·f1`, `f1 + f2`. */
  readonly name: string;
  /** Demodulated by the law: it must keep apart from every other line. */
  readonly isDemodulated: boolean;
}

/**
 * The lines of a set of dithers θ_i = θ̂_i + a_i·sin(ω_i·t + φ_i), from the Taylor series of the objective up to
 * the third harmonic.
 *
 * Gradient: M_i = (2/a_i)·sin ω_i·t, so ω_i is demodulated. On ω_i come, with what they add to the slope f_i:
 * - ω_j = ω_i: f_j·a_j/a_i·cos(φ_i − φ_j);
 * - 2ω_j = ω_i: −f_jj·a_j²/(4·a_i)·sin(φ_i − 2φ_j);
 * - ω_j + ω_k = ω_i: −f_jk·a_j·a_k/(2·a_i)·sin(φ_i − φ_j − φ_k);
 * - ω_j − ω_k = ω_i: +f_jk·a_j·a_k/(2·a_i)·sin(φ_i − φ_j + φ_k);
 * - 3ω_j = ω_i: −f_jjj·a_j³/(24·a_i)·cos(φ_i − 3φ_j).
 * Those of second order vanish where all dithers start together on a static plant, since the mean of a product of
 * three sines is 0; the lag of a plant differs from line to line and brings them back.
 *
 * Newton: N_ii = (16/a_i²)(sin² − ½) and N_ij = (4/(a_i·a_j))·sin·sin demodulate 2ω_i and ω_i ± ω_j as well. With
 * all φ = 0:
 * - 2ω_i = ω_j ± ω_k adds ±2·f_jk·a_j·a_k/a_i² to H_ii and ±f_ii·a_i²/(4·a_j·a_k) to H_jk (with k = i and the
 *   minus: ω_j = 3ω_i);
 * - ω_i ± ω_j = ω_k ± ω_l adds f_kl·a_k·a_l/(2·a_i·a_j), with the product of both signs, to H_ij (with l = i:
 *   ω_k = 2ω_i + ω_j);
 * - ω_k = 2ω_i or ω_i ± ω_j adds a share of the slope f_k as soon as anything lags.
 *
 * @param multiples dither frequencies in steps of the grid
 * @param gridScans steps of the grid in the frequency of the scans: lines above half of it come back below
 * @source conditions: K. B. Ariyur and M. Krstić (2003), "Real-Time Optimization by Extremum-Seeking Control",
 * ch. 2; A. Ghaffari, M. Krstić and D. Nešić (2012), Automatica 48:1759–1767 (both from memory); the amounts are
 * derived here and tested
 */
export function ditherLines(
  multiples: readonly number[],
  law: DitherLaw,
  gridScans: number = Infinity,
): DitherLine[] {
  return multiples.flatMap((_, i) => linesWith(multiples.slice(0, i + 1), law, gridScans));
}

/** The lines that the last of some dithers brings in, alone and together with those before it. */
export function linesWith(multiples: readonly number[], law: DitherLaw, gridScans: number): DitherLine[] {
  const isNewton = law === 'newton';
  const i = multiples.length - 1;
  const n = multiples[i] as number;
  const own = `f${i + 1}`;
  const line = (at: number, name: string, isDemodulated: boolean): DitherLine => ({
    at: folded(at, gridScans),
    name,
    isDemodulated,
  });
  return [
    line(n, own, true),
    line(2 * n, `2·${own}`, isNewton),
    line(3 * n, `3·${own}`, false),
    ...multiples
      .slice(0, i)
      .flatMap((m, j) => [
        line(n + m, `f${j + 1} + ${own}`, isNewton),
        line(Math.abs(n - m), `|f${j + 1} − ${own}|`, isNewton),
      ]),
  ];
}

/** Where a frequency shows in samples: it is mirrored at half the frequency of the scans and at zero. */
export function folded(at: number, gridScans: number): number {
  if (gridScans === Infinity) return at;
  const rest = at % gridScans;
  return Math.min(rest, gridScans - rest);
}

/** Two lines that meet, at least one of which is demodulated. */
export interface DitherConflict {
  readonly first: DitherLine;
  readonly second: DitherLine;
}

/** @returns true where one of the new lines comes closer to another, or to zero, than it may */
export function areInConflict(
  added: readonly DitherLine[],
  present: readonly DitherLine[],
  apart: number,
): boolean {
  for (let i = 0; i < added.length; i += 1) {
    const line = added[i] as DitherLine;
    if (line.isDemodulated && line.at < apart) return true;
    if (meetsAny(line, present, present.length, apart) || meetsAny(line, added, i, apart)) return true;
  }
  return false;
}

function meetsAny(line: DitherLine, others: readonly DitherLine[], count: number, apart: number): boolean {
  for (let j = 0; j < count; j += 1) {
    const other = others[j] as DitherLine;
    if (Math.abs(line.at - other.at) < apart && (line.isDemodulated || other.isDemodulated)) return true;
  }
  return false;
}

/**
 * Lines that come closer than they may; a demodulated line keeps off frequency zero as well, where the mean of
 * the objective and its drift are.
 *
 * @param apart least distance, steps of the grid
 */
export function ditherConflicts(lines: readonly DitherLine[], apart: number): DitherConflict[] {
  const still: DitherLine = { at: 0, name: '0', isDemodulated: false };
  const sorted = [still, ...lines].sort((a, b) => a.at - b.at);
  const conflicts: DitherConflict[] = [];
  for (let i = 0; i < sorted.length; i += 1) {
    const first = sorted[i] as DitherLine;
    for (let j = i + 1; j < sorted.length; j += 1) {
      const second = sorted[j] as DitherLine;
      if (second.at - first.at >= apart) break;
      if (first.isDemodulated || second.isDemodulated) conflicts.push({ first, second });
    }
  }
  return conflicts;
}
