import { traceArea, traceEnd, traceEnergy } from '../signals/trace-area.js';
import { TraceBandPower } from '../signals/trace-band-power.js';
import { findTracePeak } from '../signals/trace-peak.js';
import { TracePercentile } from '../signals/trace-percentile.js';
import { traceValueAt } from '../signals/trace-place.js';
import { rmsDifference, traceCentroid, traceWidthAt } from '../signals/trace-shape.js';
import { TraceStatistics } from '../signals/trace-statistics.js';
import type { Trace } from '../signals/trace.types.js';
import { measured, type TraceMeasure } from './trace-program.js';

/** What a number that goes with a trace, or a result, is in. */
export type TraceQuantity =
  /** Unit of the trace's values. */
  | 'value'
  /** Unit of a difference of two values: K where they are in °C. */
  | 'difference'
  | 'pure'
  | 'percent'
  /** Unit of the axis. */
  | 'place'
  /** Unit of a distance on the axis. */
  | 'distance'
  /** 1 over the unit of the axis. */
  | 'frequency'
  /** Unit of the values times that of the axis. */
  | 'area'
  /** (Unit of the values)². */
  | 'power'
  /** (Unit of the values)² times the unit of the axis. */
  | 'energy';

/** One function that makes a number of a trace. */
export interface TraceFunction {
  readonly name: string;
  /** How it is called, for completion. */
  readonly signature: string;
  /** A few words for completion. */
  readonly purpose: string;
  /** What to know before using it. */
  readonly help: string;
  /** A call over `exampleTrace`, named t, and its value. */
  readonly example: string;
  /** Traces that it takes, before its numbers. */
  readonly traces: 1 | 2;
  /** What its numbers are in. */
  readonly numbers: readonly TraceQuantity[];
  /** Whether the numbers may be left out, all together. */
  readonly areNumbersOptional: boolean;
  readonly result: TraceQuantity;
  /** What it costs, in passes over the points. */
  readonly passes: number;
  readonly create: () => TraceMeasure;
}

/** The trace t of the examples: in mV, at 0 s, 10 s, 20 s, 30 s, 40 s. */
export const exampleTrace: Trace = { points: [1, 2, 5, 3, 1], from: 0, step: 10 };

type Row = Pick<TraceFunction, 'name' | 'purpose' | 'help' | 'example' | 'result' | 'passes' | 'create'>;

const over =
  (form: string, numbers: readonly TraceQuantity[] = [], traces: 1 | 2 = 1) =>
  (row: Row): TraceFunction => ({
    ...row,
    signature: `${row.name}(${form})`,
    traces,
    numbers,
    areNumbersOptional: false,
  });
const trace = over('trace');
const window = (row: Row): TraceFunction => ({
  ...over('trace, low, high', ['place', 'place'])(row),
  signature: `${row.name}(trace), ${row.name}(trace, low, high)`,
  areNumbersOptional: true,
});

/** Of one trace, without numbers and without memory. */
const simple =
  (measure: (trace: Trace) => number): (() => TraceMeasure) =>
  () =>
  (numbers, first) =>
    void (numbers[measured] = measure(first));

const statistic =
  (read: (statistics: TraceStatistics) => number): (() => TraceMeasure) =>
  () => {
    const statistics = new TraceStatistics();
    return (numbers, { points }) => void (numbers[measured] = read(statistics.measure(points)));
  };

const peak =
  (read: (peak: { position: number; height: number }, trace: Trace) => number): (() => TraceMeasure) =>
  () => {
    const found = { position: NaN, height: NaN, curvature: NaN };
    return (numbers, first) =>
      void (numbers[measured] = findTracePeak(first.points, found) ? read(found, first) : NaN);
  };

/** In a window of the axis, or over the whole of it. */
const inWindow =
  (measure: (trace: Trace, low: number, high: number) => number): (() => TraceMeasure) =>
  () =>
  (numbers, first) => {
    const low = numbers[0] as number;
    const isWhole = Number.isNaN(low);
    numbers[measured] = isWhole
      ? measure(first, first.from, traceEnd(first))
      : measure(first, low, numbers[1] as number);
  };

const withNumber =
  (measure: (trace: Trace, x: number) => number): (() => TraceMeasure) =>
  () =>
  (numbers, first) =>
    void (numbers[measured] = measure(first, numbers[0] as number));

const windowHelp =
  'Over the whole axis where the ends are left out; no number where the window leaves the axis.';

/** Every function over traces; what is not here cannot be called. */
export const traceFunctions: readonly TraceFunction[] = [
  trace({
    name: 'count',
    purpose: 'number of points',
    help: 'A pure number. Changes where the instrument sends more or fewer points.',
    example: 'count(t) // 5',
    result: 'pure',
    passes: 1,
    create: simple(({ points }) => points.length),
  }),
  trace({
    name: 'mean',
    purpose: 'mean of the points',
    help: 'Keeps the unit. Every point counts the same.',
    example: 'mean(t) // 2.4',
    result: 'value',
    passes: 2,
    create: statistic((s) => s.mean),
  }),
  trace({
    name: 'rms',
    purpose: 'root of the mean square',
    help: 'The mean counts too: rms² is mean² plus the mean square about the mean. Keeps the unit.',
    example: 'rms(t) // 2.8284271247461903',
    result: 'value',
    passes: 2,
    create: statistic((s) => s.rms),
  }),
  trace({
    name: 'sd',
    purpose: 'standard deviation',
    help: 'About the mean, divided by one less than the number of points. No number below two points.',
    example: 'sd(t) // 1.6733200530681511',
    result: 'difference',
    passes: 2,
    create: statistic((s) => s.standardDeviation),
  }),
  trace({
    name: 'skewness',
    purpose: 'lopsidedness of the values',
    help: 'm₃ / m₂^1.5 with divisor n in both moments. A pure number; none where all points are the same.',
    example: 'skewness(t) // 0.7301958930821596',
    result: 'pure',
    passes: 2,
    create: statistic((s) => s.skewness),
  }),
  trace({
    name: 'kurtosis',
    purpose: 'heaviness of the tails of the values',
    help: 'm₄ / m₂² with divisor n in both moments: 3 for a normal distribution, 1.5 for a sine. A pure number.',
    example: 'kurtosis(t) // 2.1339285714285716',
    result: 'pure',
    passes: 2,
    create: statistic((s) => s.kurtosis),
  }),
  trace({
    name: 'crest',
    purpose: 'crest factor: greatest distance from zero over rms',
    help: 'The mean counts in both: √2 for a sine about zero. A pure number; none where all points are zero.',
    example: 'crest(t) // 1.7677669529663689',
    result: 'pure',
    passes: 2,
    create: statistic((s) => s.crestFactor),
  }),
  trace({
    name: 'lowest',
    purpose: 'least of the points',
    help: 'The point itself, nothing interpolated. Keeps the unit.',
    example: 'lowest(t) // 1',
    result: 'value',
    passes: 2,
    create: statistic((s) => s.min),
  }),
  trace({
    name: 'highest',
    purpose: 'greatest of the points',
    help: 'The point itself; peak(trace) looks between the points. Keeps the unit.',
    example: 'highest(t) // 5',
    result: 'value',
    passes: 2,
    create: statistic((s) => s.max),
  }),
  over('trace, percent', ['percent'])({
    name: 'percentile',
    purpose: 'value that so many percent of the points are below',
    help: 'Between the points in order of size, the least being 0 %, the greatest 100 %. percentile(trace, 50) is the median. Sorts: costs the most.',
    example: 'percentile(t, 75) // 3',
    result: 'value',
    passes: 16,
    create: () => {
      const percentile = new TracePercentile();
      return (numbers, { points }) =>
        void (numbers[measured] = percentile.measure(points, numbers[0] as number));
    },
  }),
  trace({
    name: 'peak',
    purpose: 'height of the highest peak',
    help: 'By the parabola through the highest point and its neighbours; the point itself at an end. Keeps the unit.',
    example: 'peak(t) // 5.025',
    result: 'value',
    passes: 1,
    create: peak(({ height }) => height),
  }),
  trace({
    name: 'peakAt',
    purpose: 'where the highest peak is, by the axis',
    help: 'By the same parabola as peak(trace). In the unit of the axis.',
    example: 'peakAt(t) // 21',
    result: 'place',
    passes: 1,
    create: peak(({ position }, { from, step }) => from + step * position),
  }),
  over('trace, level', ['value'])({
    name: 'widthAt',
    purpose: 'width of the highest peak at a level',
    help: 'From where the trace comes down to the level on the left to where it does on the right, in the unit of the axis. widthAt(trace, peak(trace) / 2) is the full width at half height. No number where the peak is below the level or the trace ends above it.',
    example: 'widthAt(t, 2) // 25',
    result: 'distance',
    passes: 2,
    create: withNumber(traceWidthAt),
  }),
  trace({
    name: 'centroid',
    purpose: 'centre of the area under the points',
    help: 'Each place on the axis weighted by the value there, in the unit of the axis. Take a base line off at the instrument: it draws the centre to the middle. No number where the values do not sum up to more than zero.',
    example: 'centroid(t) // 20.833333333333332',
    result: 'place',
    passes: 1,
    create: simple(traceCentroid),
  }),
  window({
    name: 'area',
    purpose: 'area under the trace in a window of the axis',
    help: `Straight lines between the points; below zero it counts negative. Unit of the values times that of the axis. ${windowHelp}`,
    example: 'area(t, 5, 20) // 43.75',
    result: 'area',
    passes: 2,
    create: inWindow(traceArea),
  }),
  window({
    name: 'energy',
    purpose: 'integral of the square in a window of the axis',
    help: `Straight lines between the points. Unit of the values squared times that of the axis. ${windowHelp}`,
    example: 'energy(t, 20, 40) // 206.66666666666669',
    result: 'energy',
    passes: 2,
    create: inWindow(traceEnergy),
  }),
  over('trace, low, high', ['frequency', 'frequency'])({
    name: 'bandPower',
    purpose: 'part of the mean square that lies in a band of frequencies',
    help: 'About the mean, with the Hann window; low and high in 1 over the unit of the axis: Hz where that is s. Its root is the rms in the band. Transforms: costs much.',
    example: 'bandPower(t, 0, 0.05) // 3.2416949906249126',
    result: 'power',
    passes: 48,
    create: () => {
      const power = new TraceBandPower();
      return (numbers, first) =>
        void (numbers[measured] = power.measure(first, numbers[0] as number, numbers[1] as number));
    },
  }),
  over('trace, x', ['place'])({
    name: 'valueAt',
    purpose: 'value at a place on the axis',
    help: 'On the line between the points; x in the unit of the axis. No number outside the axis.',
    example: 'valueAt(t, 15) // 3.5',
    result: 'value',
    passes: 1,
    create: withNumber(traceValueAt),
  }),
  over(
    'trace, other',
    [],
    2,
  )({
    name: 'rmsDifference',
    purpose: 'how far two traces are apart',
    help: 'Root of the mean square of the difference, point by point. Both on the same axis and in one unit; no number while they differ in length.',
    example: 'rmsDifference(t, t) // 0',
    result: 'difference',
    passes: 1,
    create: () => (numbers, first, second) => void (numbers[measured] = rmsDifference(first, second)),
  }),
];

export const traceFunctionByName: ReadonlyMap<string, TraceFunction> = new Map(
  traceFunctions.map((known) => [known.name, known]),
);
