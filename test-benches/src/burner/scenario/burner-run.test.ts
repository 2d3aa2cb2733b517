import { describe, expect, it } from 'vitest';
import { meanLossAtEnd, runInVirtualTime } from '../../kit/run-in-virtual-time.fixture.js';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { burnerBench } from '../burner-bench.js';
import { burnerEntry } from './burner-entry.js';

const scanS = 0.05;

/** Times between scans as a loaded machine makes them: from three tenths of a period to three periods, s. */
function jitter(): number {
  state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
  const share = state / 2 ** 32;
  return scanS * (share < 0.9 ? 0.3 + 1.3 * share : 1.5 + 15 * (share - 0.9));
}
let state = 7;

const { rig, envelope, objective, experiment } = shippedDocuments(
  burnerEntry({ host: '127.0.0.1', port: 1 }),
);

describe.each([
  ['on time', () => scanS],
  ['as a loaded machine scans', jitter],
])('the experiment of the demo, run to its end in virtual time, %s', (_, dtS) => {
  const course = runInVirtualTime({
    definition: burnerBench,
    rig,
    envelope,
    objective,
    experiment,
    seed: 11,
    atMostS: 600,
    dtS,
  });
  const { bench, ended, runEnded } = course;

  it('passes by the way that is drawn', () => {
    expect(ended).toEqual([
      'start.done',
      'survey.done',
      'move.done',
      'settle.done',
      'seek.done',
      'check.yes',
    ]);
    expect(runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
  });

  it('leaves the guard nothing to do', () => {
    expect(course.interventions).toBe(0);
  });

  it('starts at least two points below the true best and ends within a tenth of it', () => {
    const first = course.moments.find(({ steps }) => steps.includes('seek'));
    expect(first?.loss).toBeGreaterThan(2);
    // Two minutes of bench time.
    expect(meanLossAtEnd(course, 'seek', 24)).toBeLessThan(0.1);
  });

  it('never tells the burner an air trim outside the envelope', () => {
    expect(bench.writes.filter(({ name }) => name === 'airTrim').length).toBeGreaterThan(1000);
    expect(course.writesOutside).toBe(0);
  });

  it('comes back to its rest value', () => {
    bench.scanFor(10);
    expect(bench.engine.status()).toMatchObject({ phase: 'idle', trip: null });
    expect(bench.model.now.damperPct).toBeCloseTo(70, 9);
  });
});
