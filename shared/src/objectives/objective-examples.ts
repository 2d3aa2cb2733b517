import type { Direction } from './objective.schema.js';

/** Readings of one operating point, by channel. */
export type OperatingPoint = Readonly<Record<string, number>>;

/** A composite objective to learn from: why the plain quantity is not enough, and what keeps off the cliff. */
export interface ObjectiveExample {
  readonly title: string;
  readonly direction: Direction;
  /** What one would seek at first, and why it leads over the cliff. */
  readonly plain: string;
  readonly trap: string;
  readonly expression: string;
  readonly unit: string;
  readonly validity: readonly { condition: string; message: string }[];
  /** Units of the channels that it reads. */
  readonly channels: Readonly<Record<string, string>>;
  /** Operating points along the way, the last ones over the cliff, and the value of the objective at each. */
  readonly way: readonly { point: OperatingPoint; value: number; isValid: boolean }[];
  /** Place in `way` that the composite finds best; the plain quantity finds another. */
  readonly best: number;
}

/** Examples for the editor and for `docs/expressions.md`; a test evaluates every point of them. */
export const objectiveExamples: readonly ObjectiveExample[] = [
  {
    title: 'Efficiency of a burner that must not smoke',
    direction: 'maximise',
    plain: 'efficiency',
    trap: 'Less air heats less of it, so that the efficiency goes on rising while the flame already makes carbon monoxide, until it lifts off.',
    expression: 'efficiency - max(0, co - 100) / 50',
    unit: '%',
    validity: [
      { condition: 'flame > 0.5', message: 'Without a flame the figure means nothing.' },
      { condition: 'co < 400', message: 'With so much CO the burner is over the cliff.' },
    ],
    channels: { efficiency: '%', co: 'ppm', flame: '' },
    way: [
      { point: { efficiency: 88, co: 20, flame: 1 }, value: 88, isValid: true },
      { point: { efficiency: 91, co: 60, flame: 1 }, value: 91, isValid: true },
      { point: { efficiency: 92, co: 250, flame: 1 }, value: 89, isValid: true },
      { point: { efficiency: 93, co: 900, flame: 1 }, value: 77, isValid: false },
      { point: { efficiency: 99, co: 5, flame: 0 }, value: 99, isValid: false },
    ],
    best: 1,
  },
  {
    title: 'Pulse energy that still has its shape',
    direction: 'maximise',
    plain: 'energy',
    trap: 'More drive gives more energy even where the pulse has broken up into several; energy alone cannot tell.',
    expression: 'energy * (1 - weight(0.5) * abs(width - 12) / 12)',
    unit: 'mJ',
    validity: [
      { condition: '6 < width < 18', message: 'The pulse is no longer one pulse.' },
      { condition: 'kurtosis > 2', message: 'The shape has no peak.' },
    ],
    channels: { energy: 'mJ', width: 'ns', kurtosis: '' },
    way: [
      { point: { energy: 4, width: 12, kurtosis: 3 }, value: 4, isValid: true },
      { point: { energy: 6, width: 14, kurtosis: 2.8 }, value: 5.5, isValid: true },
      { point: { energy: 7, width: 20, kurtosis: 2.1 }, value: 4.666666666666667, isValid: false },
      { point: { energy: 8, width: 13, kurtosis: 1.2 }, value: 7.666666666666667, isValid: false },
    ],
    best: 1,
  },
  {
    title: 'Power into a load, with little of it coming back',
    direction: 'maximise',
    plain: 'forward',
    trap: 'The generator shows most forward power where nearly all of it is reflected and heats the matching network.',
    expression: 'forward - reflected - 4 * max(0, reflected - 20)',
    unit: 'W',
    validity: [
      { condition: 'reflected < 0.25 * forward', message: 'The load is not matched: wide search first.' },
      { condition: 'coil < 90', message: 'The coil is too hot for the figure to hold for long.' },
    ],
    channels: { forward: 'W', reflected: 'W', coil: '°C' },
    way: [
      { point: { forward: 300, reflected: 40, coil: 60 }, value: 180, isValid: true },
      { point: { forward: 310, reflected: 10, coil: 55 }, value: 300, isValid: true },
      { point: { forward: 350, reflected: 60, coil: 70 }, value: 130, isValid: true },
      { point: { forward: 400, reflected: 15, coil: 95 }, value: 385, isValid: false },
      { point: { forward: 420, reflected: 300, coil: 80 }, value: -1000, isValid: false },
    ],
    best: 1,
  },
];
