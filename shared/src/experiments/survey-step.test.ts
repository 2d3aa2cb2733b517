import { describe, expect, it } from 'vitest';
import { testChain, testObjective, testStep as s, testSurvey } from './experiment.fixture.js';
import { hill, runScript, type Plant } from './scripted-plant.fixture.js';

const survey = (change: Parameters<typeof testSurvey>[0] = {}) => testChain(testSurvey(change));
const exit = (run: ReturnType<typeof runScript>) =>
  run.of('step.ended').find(({ step }) => step === 'survey');

/** Play of width b between the actuator and what it moves: the follower lags b/2 behind on either way. */
function withPlay(width: number, map: (x: number) => number): Plant {
  let follower = NaN;
  return ({ trim = NaN }) => {
    if (Number.isNaN(follower)) follower = trim;
    follower = Math.min(Math.max(follower, trim - width / 2), trim + width / 2);
    return { yield: map(follower), flame: 1 };
  };
}

/** First-order lag behind a map, exact for a held input. */
function withLag(tauS: number, map: (x: number) => number): Plant {
  let y = NaN;
  return ({ trim = NaN }) => {
    y = Number.isNaN(y) ? map(trim) : y + (1 - Math.exp(-0.05 / tauS)) * (map(trim) - y);
    return { yield: y, flame: 1 };
  };
}

describe('survey', () => {
  it('visits every value up and down, stays at the last and names the best', () => {
    const run = runScript({ graph: survey({ from: -4, to: 4, points: 9 }), plant: hill });
    const visits = run.of('survey.point-measured');
    expect(visits.map(({ value }) => value)).toEqual([
      -4, -3, -2, -1, 0, 1, 2, 3, 4, 4, 3, 2, 1, 0, -1, -2, -3, -4,
    ]);
    expect(visits.map(({ objective }) => objective)).toEqual(
      visits.map(({ value }) => 90 - (value - 2) ** 2),
    );
    expect(visits.map(({ branch }) => branch).join('')).toBe('up'.repeat(9) + 'down'.repeat(9));
    expect(run.results).toMatchObject({
      'survey.best.trim': 2,
      'survey.best.objective': 90,
      'survey.hysteresis': 0,
      'survey.peaks': 1,
      'survey.prominence': 36,
      'survey.curvature.trim': expect.closeTo(2, 9),
      'survey.backlash.trim': expect.closeTo(0, 9),
      'survey.noise': 0,
    });
    expect(run.scans.at(-1)?.applied['trim']).toBe(-4);
  });

  it('goes to the least where the objective is to be made small', () => {
    const objective = testObjective({ direction: 'minimise', expression: '100 - yield' });
    const run = runScript({ graph: survey(), plant: hill, objective });
    expect(run.results['survey.best.trim']).toBe(2);
    expect(run.results['survey.best.objective']).toBe(10);
  });

  it('shows the play of a linkage as branches that lie its width apart', () => {
    // Up: x = u − b/2, down: x = u + b/2 (play operator), so a slope of m parts the branches by m·b.
    const width = 0.6;
    const slope = 3;
    const run = runScript({ graph: survey(), plant: withPlay(width, (x) => slope * x) });
    expect(run.results['survey.hysteresis']).toBeCloseTo(slope * width, 9);
    const visits = run.of('survey.point-measured');
    const at = (value: number, branch: string) =>
      visits.find((visit) => visit.value === value && visit.branch === branch)?.objective ?? NaN;
    for (const value of [-4, -1, 0, 3]) {
      expect(at(value, 'down') - at(value, 'up')).toBeCloseTo(slope * width, 9);
    }
  });

  it('finds the middle of both branches', () => {
    // Mean of both ways: 90 − (u − 2)² − b²/4.
    const run = runScript({ graph: survey(), plant: withPlay(1.2, (x) => 90 - (x - 2) ** 2) });
    expect(run.results['survey.best.trim']).toBe(2);
    expect(run.results['survey.best.objective']).toBeCloseTo(90 - 1.2 ** 2 / 4, 9);
  });

  it('waits for the plant before it averages', () => {
    const errorOf = (settleS: number) => {
      const graph = survey({ settleS, averageS: 0.05 });
      const run = runScript({ graph, plant: withLag(0.5, (x) => x), start: { trim: -5 } });
      return run.results['survey.hysteresis'] ?? NaN;
    };
    // Up is 1·e^(−t/τ) too low and down as much too high: read one scan after the settling time.
    expect(errorOf(3) / (2 * Math.exp(-3.05 / 0.5))).toBeCloseTo(1, 1);
    expect(errorOf(0.2)).toBeGreaterThan(1);
  });

  it('gives the standard error of each mean', () => {
    // Ten values of ±1 have s² = 10/9, and the mean a standard error of √(10/9/10) = 1/3.
    let sign = 1;
    const plant = () => ({ yield: 50 + (sign = -sign), flame: 1 });
    const run = runScript({ graph: survey({ averageS: 0.5, points: 3 }), plant });
    expect(run.of('survey.point-measured').map((visit) => visit.standardError)).toEqual(
      Array.from({ length: 6 }, () => expect.closeTo(1 / 3, 9)),
    );
  });

  it('takes no value where the objective is not valid, however high it is', () => {
    const cliff: Plant = ({ trim = NaN }) => ({ yield: 50 + trim, flame: trim > 1.5 ? 0 : 1 });
    const run = runScript({ graph: survey(), plant: cliff });
    expect(run.results['survey.best.trim']).toBe(1);
    const visits = run.of('survey.point-measured');
    expect(visits.filter(({ isValid }) => !isValid).map(({ value }) => value)).toEqual([
      2, 3, 4, 5, 5, 4, 3, 2,
    ]);
  });

  it('leaves by "failed" where the objective is valid nowhere or unknown', () => {
    const dark = runScript({ graph: survey(), plant: () => ({ yield: 50, flame: 0 }) });
    expect(exit(dark)).toEqual({
      type: 'step.ended',
      step: 'survey',
      port: 'failed',
      results: {},
      reason: 'The objective was valid nowhere.',
    });
    expect(dark.end?.verdict).toBe('inconclusive');
    const blind = runScript({ graph: survey(), plant: () => ({ yield: NaN, flame: 1 }) });
    expect(exit(blind)?.port).toBe('failed');
    expect(blind.of('survey.point-measured')[0]).toMatchObject({
      objective: null,
      standardError: null,
      isValid: false,
    });
  });

  it.each([
    [
      'an end that is no number',
      { to: { expression: '1 / (flame - 1)' } },
      'nothing to survey from -5 to NaN',
    ],
    ['no span', { to: { expression: '-5 * flame' } }, 'nothing to survey from -5 to -5'],
    [
      'an end outside the envelope',
      { to: { expression: '12 * flame' } },
      'is outside its envelope of -10 to 10',
    ],
  ])('leaves by "failed" with %s', (_name, change, reason) => {
    const run = runScript({ graph: survey(change), plant: hill });
    expect(exit(run)?.port).toBe('failed');
    expect(exit(run)?.reason).toContain(reason);
  });
});

describe('a survey over two actuators', () => {
  const bowl: Plant = ({ trim = NaN, load = NaN }) => ({
    yield: 90 - (trim - 1) ** 2 - 0.01 * (load - 40) ** 2,
    flame: 1,
  });
  const axis = (channel: string, from: number, to: number, isUpAndDown: boolean) => ({
    ...{ channel, from, to, points: 5, isUpAndDown },
  });

  it('visits the grid in short moves, and leaves place, hills, curvatures and noise behind', () => {
    const actuators = [axis('trim', -3, 5, true), axis('load', 20, 60, false)];
    const run = runScript({ graph: survey({ actuators }), plant: bowl });
    const visits = run.of('survey.point-measured');
    expect(visits.length).toBe(50);
    expect(visits.slice(0, 11).map(({ value, second }) => `${value}/${second?.value}`)).toEqual([
      '-3/20',
      '-1/20',
      '1/20',
      '3/20',
      '5/20',
      '5/20',
      '3/20',
      '1/20',
      '-1/20',
      '-3/20',
      '-3/30',
    ]);
    expect(run.results).toMatchObject({
      'survey.best.trim': 1,
      'survey.best.load': 40,
      'survey.best.objective': 90,
      'survey.peaks': 1,
      'survey.noise': 0,
      'survey.curvature.trim': expect.closeTo(2, 6),
      'survey.curvature.load': expect.closeTo(0.02, 6),
    });
    expect(run.results['survey.backlash.load']).toBeUndefined();
  });

  it('is named in the results that later steps may use', () => {
    const actuators = [axis('trim', -3, 5, false), axis('load', 20, 60, true)];
    const graph = testChain(testSurvey({ actuators }), s('check', { criterion: 'survey.best.load > 30' }));
    const run = runScript({ graph, plant: bowl });
    expect(run.end?.verdict).toBe('pass');
  });
});
