import { compileObjective, Quality, Readings, rigSchema, type ObjectiveEvaluator } from '@cresthold/shared';
import type { Benchmark } from './benchmark.types.js';
import { heapGrowthOf } from './heap-growth.js';

const evaluationsPerRound = 200_000;
const rounds = 11;
const heapEvaluations = 10_000_000;

const channelIds = Array.from({ length: 20 }, (_, i) => `x${i}`);

/** Twenty terms as composite objectives have them: weights, products, penalties from a limit on, squares. */
const text = [
  '3.5 * x0 - 0.8 * x1 + 0.25 * x2 * x3',
  ' - max(0, x4 - 4) / 5 - max(0, 3 - x5) * 2.5',
  ' - 0.02 * (x6 - 2) ^ 2 + sqrt(x7) - 0.4 * x8 + 0.1 * x9 * x10',
  ' + x11 / (1 + x12) - 0.3 * abs(x13 - 5) + 1.2 * x14 - 0.7 * x15',
  ' - min(x16, 3) + log(1 + x17) - 0.05 * x18 * x18 + 0.6 * x19 - 0.01 * x0 * x1',
  ' + 0.2 * x2 - 0.15 * x3 + 0.9 * x5',
].join('');

/** The same arithmetic written out, over the same array of values. */
function byHand(x: Float64Array): number {
  const at = (i: number) => x[i] as number;
  return (
    3.5 * at(0) -
    0.8 * at(1) +
    0.25 * at(2) * at(3) -
    Math.max(0, at(4) - 4) / 5 -
    Math.max(0, 3 - at(5)) * 2.5 -
    0.02 * (at(6) - 2) ** 2 +
    Math.sqrt(at(7)) -
    0.4 * at(8) +
    0.1 * at(9) * at(10) +
    at(11) / (1 + at(12)) -
    0.3 * Math.abs(at(13) - 5) +
    1.2 * at(14) -
    0.7 * at(15) -
    Math.min(at(16), 3) +
    Math.log(1 + at(17)) -
    0.05 * at(18) * at(18) +
    0.6 * at(19) -
    0.01 * at(0) * at(1) +
    0.2 * at(2) -
    0.15 * at(3) +
    0.9 * at(5)
  );
}

/** One evaluation of a composite objective of twenty terms, quality of its readings included. */
export const objectiveStep: Benchmark = {
  name: 'objective-step',
  purpose: 'Nanoseconds for a 20-term objective against the same arithmetic by hand; growth of the heap.',
  run() {
    const objective = compiled();
    const readings = new Readings(channelIds);
    checkAgreement(objective, readings);
    const times = { objective: [] as number[], hand: [] as number[] };
    for (let round = 0; round < rounds; round += 1) {
      times.hand.push(nanoseconds(evaluationsPerRound, () => byHandOver(readings, evaluationsPerRound)));
      times.objective.push(
        nanoseconds(evaluationsPerRound, () => evaluateOver(objective, readings, evaluationsPerRound)),
      );
    }
    const [own, hand] = [median(times.objective), median(times.hand)];
    const heapGrowthBytes = heapGrowthOf(() => evaluateOver(objective, readings, heapEvaluations));
    return Promise.resolve({
      name: this.name,
      value: own,
      unit: 'ns',
      ratio: own / hand,
      against: 'the same arithmetic in a bare loop',
      heapGrowthBytes,
    });
  },
};

function compiled(): ObjectiveEvaluator {
  const channel = (id: string) => ({
    kind: 'sensor',
    id,
    title: id,
    display: { min: 0, max: 10, decimals: 1 },
    connection: 'plc',
    address: {},
  });
  const rig = rigSchema.parse({
    id: 'benchmark',
    title: 'Benchmark',
    periodMs: 10,
    connections: [{ id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} }],
    channels: channelIds.map(channel),
  });
  const content = {
    title: 'Composite',
    direction: 'maximise' as const,
    expression: text,
    unit: '',
    validity: [],
  };
  const outcome = compileObjective(content, rig);
  if (!outcome.isOk) throw new Error(outcome.faults[0]?.message);
  return outcome.objective;
}

/** Both sides set one reading anew per evaluation, so that nothing can be lifted out of the loop. */
function move(readings: Readings, i: number): void {
  readings.set(i % 20, 1 + (i % 997) * 0.01, Quality.good);
}

function checkAgreement(objective: ObjectiveEvaluator, readings: Readings): void {
  for (let i = 0; i < 2000; i += 1) {
    move(readings, i);
    if (i < 20) continue;
    const [own, hand] = [objective.evaluate(readings).value, byHand(readings.values)];
    if (Math.abs(own - hand) > 1e-9) throw new Error(`The two sides differ: ${own} and ${hand}.`);
  }
}

function evaluateOver(objective: ObjectiveEvaluator, readings: Readings, times: number): number {
  let sum = 0;
  for (let i = 0; i < times; i += 1) {
    move(readings, i);
    sum += objective.evaluate(readings).value;
  }
  return sum;
}

function byHandOver(readings: Readings, times: number): number {
  let sum = 0;
  for (let i = 0; i < times; i += 1) {
    move(readings, i);
    sum += byHand(readings.values);
  }
  return sum;
}

function nanoseconds(times: number, act: () => number): number {
  const startMs = performance.now();
  const sum = act();
  const tookMs = performance.now() - startMs;
  if (!Number.isFinite(sum)) throw new Error('The objective came to no number.');
  return (tookMs * 1e6) / times;
}

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? NaN;
}
