import {
  seekingLaws,
  type SeekingInput,
  type SeekingLaw,
  type SeekingLawId,
  type SeekingState,
} from '@cresthold/shared';
import type { Benchmark } from '../benchmark.types.js';
import { heapGrowthOf } from '../heap-growth.js';
import {
  bareBoundedRate,
  bareConstrained,
  bareDiscrete,
  bareGradient,
  bareLeastSquares,
  barePerturbObserve,
  bareSlope,
  bareSpsa,
  type BareLaw,
} from './bare-laws.js';
import { bareNewton } from './bare-newton.js';
import { amplitude, gain, periodS, scanS, secondRatio } from './law-step-settings.js';

const steps = 1_000_000;
const rounds = 7;
const heapSteps = 10_000_000;

const axis = { min: -10, max: 10, amplitude };
const periodic = { ...axis, periodS, gain };

interface Case {
  parameters: object;
  bare: BareLaw;
}

const cases: Record<SeekingLawId, Case> = {
  gradient: { parameters: { axes: [periodic] }, bare: bareGradient },
  discrete: {
    parameters: { axes: [{ ...axis, scansPerPeriod: periodS / scanS, gain: gain * scanS }] },
    bare: bareDiscrete,
  },
  newton: {
    parameters: {
      axes: [1, secondRatio].map((ratio) => ({ ...axis, periodS: periodS / ratio, curvature: 2 })),
      rate: 0.1,
      inverseRate: 0.1,
    },
    bare: bareNewton,
  },
  'least-squares': { parameters: { axes: [periodic] }, bare: bareLeastSquares },
  'bounded-rate': { parameters: { axes: [periodic] }, bare: bareBoundedRate },
  slope: { parameters: { axes: [{ ...periodic, slope: 0.3 }] }, bare: bareSlope },
  constrained: { parameters: { axes: [periodic], side: 'below' }, bare: bareConstrained },
  spsa: { parameters: { axes: [{ ...axis, gain }], dwellS: periodS / 2 }, bare: bareSpsa },
  'perturb-observe': { parameters: { axes: [axis], dwellS: periodS / 2 }, bare: barePerturbObserve },
};

/** One scan of each seeking law against its arithmetic written out by hand. */
export const lawSteps: readonly Benchmark[] = Object.entries(seekingLaws).map(([id, law]) =>
  lawStep(law as unknown as SeekingLaw<object, SeekingState>, cases[id as SeekingLawId]),
);

function lawStep(law: SeekingLaw<object, SeekingState>, { parameters, bare }: Case): Benchmark {
  return {
    name: `law-step/${law.id}`,
    purpose: `One scan of the law "${law.title}" in ns, against its arithmetic written out by hand.`,
    run() {
      const climb = climber(law, parameters);
      const times = { law: [] as number[], bare: [] as number[] };
      for (let round = 0; round < rounds; round += 1) {
        times.law.push(nsPerStep(() => climb(steps)));
        times.bare.push(nsPerStep(() => bare(steps, amplitude)));
      }
      const heapGrowthBytes = heapGrowthOf(() => climb(heapSteps));
      const value = median(times.law);
      return Promise.resolve({
        name: this.name,
        value,
        unit: 'ns',
        ratio: value / median(times.bare),
        against: 'the same arithmetic in a bare loop',
        heapGrowthBytes,
      });
    },
  };
}

/** A function that lets the law climb −Σx² for so many scans, on from where it was. */
function climber(law: SeekingLaw<object, SeekingState>, settings: object): (count: number) => number {
  const parameters = law.parametersSchema.parse(settings);
  const { axes } = settings as { axes: object[] };
  const state = law.init(parameters, new Array<number>(axes.length).fill(1));
  const { estimate, dither } = state;
  const input: SeekingInput = { objective: 0, isValid: true, measured: estimate, constraint: 0, bound: 3 };
  return (count) => {
    let applied = 0;
    for (let i = 0; i < count; i += 1) {
      let objective = 0;
      for (let k = 0; k < estimate.length; k += 1) {
        applied = (estimate[k] as number) + (dither[k] as number);
        objective -= applied * applied;
      }
      input.objective = objective;
      input.constraint = applied;
      law.step(state, input, scanS);
    }
    return applied;
  };
}

function nsPerStep(act: () => number): number {
  const startMs = performance.now();
  const end = act();
  const ns = ((performance.now() - startMs) * 1e6) / steps;
  if (!Number.isFinite(end)) throw new Error('The law gave no number.');
  return ns;
}

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? NaN;
}
