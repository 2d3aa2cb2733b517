import { expect, it } from 'vitest';
import { rampTests, rampTestS } from '../irradiance.js';
import { describeStringExperiments, efficiencyOf, run, withSeek } from './string-experiment.fixture.js';

describeStringExperiments(20, 20);

it('gives 99 % over all ramps of EN 50530 from 300 to 1000 W/m²', { timeout: 600_000 }, () => {
  const afterS = rampTestS(rampTests['medium-to-high']);
  const course = run('hold-by-ripple', 'ramps-high', 1, (graph) =>
    withSeek(graph, ({ end }) => ({ end: { ...end, afterS } })),
  );
  expect(course.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
  const share = efficiencyOf(course, 'seek');
  console.info(
    `ramps of EN 50530: ${(100 * share).toFixed(3)} % of what was to be had in ${afterS.toFixed(0)} s`,
  );
  expect(share).toBeGreaterThan(0.99);
});
