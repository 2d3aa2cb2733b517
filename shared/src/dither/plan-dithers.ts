import { z } from 'zod';
import { DomainError } from '../errors/domain-error.js';
import { areInConflict, ditherLines, linesWith, type DitherLine } from './dither-lines.js';

const bandSchema = z
  .object({ fromHz: z.number().min(0), toHz: z.number().positive().max(1e9) })
  .refine(({ fromHz, toHz }) => fromHz < toHz, { message: 'A band begins below its end.', path: ['toHz'] });

export const ditherRequestSchema = z
  .object({
    actuators: z.int().min(1).max(16),
    law: z.enum(['gradient', 'newton']),
    /** Time between two scans, s. */
    scanS: z.number().positive().max(1e6),
    /** Range of the dithers, Hz. */
    lowestHz: z.number().positive().max(1e9),
    highestHz: z.number().positive().max(1e9),
    /** Least scans in a period of the fastest dither. */
    scansPerPeriodMin: z.number().min(4).max(1e6).default(10),
    /** Least distance between lines, Hz: several times the corner of the low-pass. */
    apartHz: z.number().positive().max(1e9),
    /** Window in which every dither has whole periods, s, a whole number of scans; null where none is asked. */
    windowS: z.number().positive().max(1e9).nullable().default(null),
    /** Bands that no dither and none of its lines that are demodulated may touch: mains, resonances. */
    forbidden: z.array(bandSchema).max(50).default([]),
  })
  .refine(({ lowestHz, highestHz }) => lowestHz <= highestHz, {
    message: 'The lowest frequency is above the highest: swap them.',
    path: ['lowestHz'],
  });
export type DitherRequest = z.input<typeof ditherRequestSchema>;
type Request = z.output<typeof ditherRequestSchema>;

export interface DitherPlan {
  /** One for each actuator, rising. */
  frequenciesHz: number[];
  periodsS: number[];
  /** Time in which all dithers have whole periods, and the scans in it. */
  windowS: number;
  windowScans: number;
  /** Whole periods of each dither in the window. */
  multiples: number[];
  /** Smallest distance of a demodulated line from any other, Hz. */
  apartHz: number;
}

/** Trials after which the search gives up; it is complete for small tasks and bounded for all. */
const trialsMax = 20_000;
/** Steps of the grid in the least distance where no window is asked for. */
const finenessMax = 4;
const gridStepsMax = 1e7;

interface Grid {
  windowScans: number;
  stepHz: number;
  apart: number;
  from: number;
  to: number;
}

/**
 * Chooses a frequency for the dither of each actuator, the slowest that will do, so that nothing which the
 * objective answers with falls on what the law demodulates: the conditions and what each is worth stand at
 * `ditherLines`. Frequencies are multiples of 1/window, so that all dithers have whole periods in it; lines above
 * half the scan frequency are judged where they come back. The same request always has the same plan.
 *
 * @throws analysis.invalid-input where the request is at fault, or no plan was found: with the field to change
 * @example
 * planDithers({ actuators: 2, law: 'newton', scanS: 0.1, lowestHz: 0.2, highestHz: 1, apartHz: 0.1, windowS: 10 }).frequenciesHz // [0.2, 0.5]
 */
export function planDithers(input: DitherRequest): DitherPlan {
  const request = checked(input);
  const grid = gridOf(request);
  const multiples = search(request, grid);
  const lines = ditherLines(multiples, request.law, grid.windowScans);
  return {
    frequenciesHz: multiples.map((n) => n * grid.stepHz),
    periodsS: multiples.map((n) => 1 / (n * grid.stepHz)),
    windowS: grid.windowScans * request.scanS,
    windowScans: grid.windowScans,
    multiples,
    apartHz: closest(lines) * grid.stepHz,
  };
}

function fault(field: string, message: string): DomainError {
  return new DomainError('analysis.invalid-input', `No dither plan: ${message}`, [{ field, message }]);
}

function checked(input: DitherRequest): Request {
  const outcome = ditherRequestSchema.safeParse(input);
  if (outcome.success) return outcome.data;
  const details = outcome.error.issues.map(({ path, message }) => ({ field: path.join('.'), message }));
  throw new DomainError('analysis.invalid-input', 'The request for a dither plan has faults.', details);
}

function gridOf(request: Request): Grid {
  const { scanS, apartHz, windowS, lowestHz, highestHz, scansPerPeriodMin } = request;
  const windowScans =
    windowS === null ? Math.ceil(finenessMax / (apartHz * scanS)) : Math.round(windowS / scanS);
  if (windowS !== null && Math.abs(windowScans * scanS - windowS) > 1e-6 * scanS) {
    throw fault('windowS', `a window of ${windowS} s is no whole number of scans of ${scanS} s: change it.`);
  }
  if (windowScans > gridStepsMax) throw fault('apartHz', 'the lines need not be so close: make this larger.');
  const stepHz = 1 / (windowScans * scanS);
  const fastestHz = Math.min(highestHz, 1 / (scanS * scansPerPeriodMin));
  const rounding = 1e-9;
  const grid = {
    windowScans,
    stepHz,
    apart: Math.max(1, Math.ceil(apartHz / stepHz - rounding)),
    from: Math.max(1, Math.ceil(lowestHz / stepHz - rounding)),
    to: Math.floor(fastestHz / stepHz + rounding),
  };
  if (fastestHz < lowestHz) {
    throw fault(
      'lowestHz',
      `with ${scansPerPeriodMin} scans in a period no dither is faster than ${round(fastestHz)} Hz: allow slower ones or scan faster.`,
    );
  }
  if (grid.to < grid.from) {
    throw fault('windowS', 'no frequency of the range has whole periods in the window: make it longer.');
  }
  return grid;
}

const round = (value: number) => Number(value.toPrecision(4));

/** Depth first, slowest first. */
function search(request: Request, grid: Grid): number[] {
  const chosen: number[] = [];
  const lines: DitherLine[] = [];
  let trials = 0;
  let most = 0;
  let next = grid.from;
  while (chosen.length < request.actuators) {
    if (next > grid.to) {
      const last = chosen.pop();
      if (last === undefined) throw noPlan(request, grid, most, true);
      lines.length = chosen.length * (chosen.length + 2);
      next = last + 1;
      continue;
    }
    trials += 1;
    if (trials > trialsMax) throw noPlan(request, grid, most, false);
    const added = linesWith([...chosen, next], request.law, grid.windowScans);
    const isClear = !areInConflict(added, lines, grid.apart) && !areForbidden(added, request, grid);
    if (isClear) {
      chosen.push(next);
      lines.push(...added);
      most = Math.max(most, chosen.length);
    }
    next += isClear ? grid.apart : 1;
  }
  return chosen;
}

function areForbidden(lines: readonly DitherLine[], request: Request, grid: Grid): boolean {
  return lines.some(({ at, isDemodulated }) => isDemodulated && isForbidden(at * grid.stepHz, request));
}

function isForbidden(hz: number, { forbidden }: Request): boolean {
  return forbidden.some(({ fromHz, toHz }) => hz >= fromHz && hz <= toHz);
}

function noPlan(request: Request, grid: Grid, most: number, isCertain: boolean): DomainError {
  const { actuators, lowestHz, apartHz } = request;
  const fastestHz = round(grid.to * grid.stepHz);
  const found = most === 0 ? 'none fits' : `${most} of ${actuators} fit`;
  const range = `between ${lowestHz} and ${fastestHz} Hz with lines ${apartHz} Hz apart ${found}`;
  const certainty = isCertain ? '' : ' as far as was searched';
  return fault(
    'apartHz',
    `${range}${certainty}: let lines come closer, widen the range, shorten forbidden bands or seek with fewer actuators at once.`,
  );
}

/** Smallest distance of a demodulated line from another or from zero, steps of the grid. */
function closest(lines: readonly DitherLine[]): number {
  const sorted = [...lines].sort((a, b) => a.at - b.at);
  let least = Infinity;
  let before: DitherLine = { at: 0, name: '0', isDemodulated: false };
  let demodulated: number | null = null;
  for (const line of sorted) {
    if (line.isDemodulated) least = Math.min(least, line.at - before.at);
    else if (demodulated !== null) least = Math.min(least, line.at - demodulated);
    if (line.isDemodulated) demodulated = line.at;
    before = line;
  }
  return least;
}
