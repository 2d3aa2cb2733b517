import { seededRandom } from '../kit/seeded-random.js';

/** A plant that a law is tried on: a map to be made large, best at `best`, and what stands behind it. */
export interface TablePlant {
  readonly id: string;
  readonly title: string;
  readonly actuators: number;
  readonly start: readonly number[];
  readonly half: number;
  /** Size of the second derivative at the peak, per actuator, as a survey would find it. */
  readonly curvature: readonly number[];
  readonly noise: number;
  /** Time constants behind the map, s. */
  readonly lagsS: readonly number[];
  best(tS: number): readonly number[];
  /** Objective without noise; 0 at the best point. NaN where it is not valid. */
  value(x: readonly number[], tS: number): number;
}

const origin = { half: 5, noise: 0, lagsS: [], best: () => [0] };
const square = (x: number) => x * x;

export const tablePlants: readonly TablePlant[] = [
  {
    ...origin,
    id: 'quadratic',
    title: 'quadratic: −x²',
    actuators: 1,
    start: [2],
    curvature: [2],
    value: ([x = NaN]) => -square(x),
  },
  {
    ...origin,
    id: 'skewed',
    title: 'skewed: −(e^x − x − 1), steep on one side',
    actuators: 1,
    start: [-3],
    curvature: [1],
    value: ([x = NaN]) => -(Math.exp(x) - x - 1),
  },
  {
    ...origin,
    id: 'two-hill',
    title: 'two hills: a lower one at −2, started on its side',
    actuators: 1,
    start: [-3],
    curvature: [2],
    best: () => [1.5],
    value: ([x = NaN]) =>
      2 * (Math.exp(-square(x - 1.5) / 2) - 1) + 1.2 * Math.exp(-2 * square(x + 2)) - twoHillRest,
  },
  {
    ...origin,
    id: 'ridge',
    title: 'ridge: two actuators, condition number 100, turned by 30°',
    actuators: 2,
    start: [1.5, -1],
    // Diagonal of the Hessian: 10·cos² 30° + 0.1·sin² 30° and the other way round.
    curvature: [7.525, 2.575],
    best: () => [0, 0],
    value: ([x = NaN, y = NaN]) => {
      const [c, s] = [Math.cos(Math.PI / 6), Math.sin(Math.PI / 6)];
      return -(10 * square(c * x + s * y) + 0.1 * square(c * y - s * x)) / 2;
    },
  },
  {
    ...origin,
    id: 'drifting',
    title: 'drifting optimum: 0.002 a second',
    actuators: 1,
    start: [0.5],
    curvature: [2],
    best: (tS) => [0.002 * tS],
    value: ([x = NaN], tS) => -square(x - 0.002 * tS),
  },
  {
    ...origin,
    id: 'noisy',
    title: 'noisy: quadratic with noise of 0.05, five times the ripple of the objective at the peak',
    actuators: 1,
    start: [2],
    curvature: [2],
    noise: 0.05,
    value: ([x = NaN]) => -square(x),
  },
  {
    ...origin,
    id: 'lagging',
    title: 'second-order lag: quadratic behind 0.15 s and 0.05 s',
    actuators: 1,
    start: [2],
    curvature: [2],
    lagsS: [0.15, 0.05],
    value: ([x = NaN]) => -square(x),
  },
  {
    ...origin,
    id: 'cliff',
    title: 'cliff: rises with x up to 1, where the objective is no longer valid',
    actuators: 1,
    start: [-2],
    curvature: [2],
    best: () => [1],
    value: ([x = NaN]) => (x > 1 ? NaN : x - 1),
  },
];

/** The lower hill's share at the top of the higher one. */
const twoHillRest = 1.2 * Math.exp(-2 * square(3.5));

/** The plant in time: lags and seeded noise behind its map. */
export class PlantCourse {
  private readonly random;
  private readonly states: number[];

  constructor(
    private readonly plant: TablePlant,
    seed: number,
  ) {
    this.random = seededRandom(seed);
    this.states = plant.lagsS.map(() => plant.value(plant.start, 0));
  }

  /** @returns the measured objective, dtS after the actuators were put to x; NaN where it is not valid */
  answer(x: readonly number[], tS: number, dtS: number): number {
    let value = this.plant.value(x, tS);
    this.plant.lagsS.forEach((lagS, i) => {
      const state = this.states[i] ?? NaN;
      value = state + (1 - Math.exp(-dtS / lagS)) * (value - state);
      this.states[i] = value;
    });
    return value + this.plant.noise * this.random.normal();
  }
}
