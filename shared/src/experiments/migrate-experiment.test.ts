import { describe, expect, it } from 'vitest';
import { testChain, testSeek, testStep, testSurvey } from './experiment.fixture.js';
import { experimentContentSchema, type ExperimentContent } from './experiment.schema.js';
import { migrateExperiment } from './migrate-experiment.js';

const position = { x: 40, y: 120 };
const best = { expression: 'survey.best.airTrim' };

/** As releases before several actuators stored it. */
const stored = {
  title: 'Find the best air trim',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', title: '', position, parameters: {} },
      {
        kind: 'survey',
        id: 'survey',
        title: 'Look',
        position,
        parameters: {
          ...{ actuator: 'airTrim', from: 14, to: { expression: '60 + 2' }, points: 13 },
          ...{ settleS: 0.8, averageS: 0.6, isUpAndDown: true },
        },
      },
      {
        kind: 'seek',
        id: 'seek',
        title: '',
        position,
        parameters: {
          ...{
            actuator: 'airTrim',
            law: 'gradient',
            ditherAmplitude: 1.2,
            ditherPeriodS: { expression: '2.5' },
          },
          ...{ washoutRatio: 0.3, lowPassRatio: 0.5, gain: best, phaseDeg: 10, min: 12, max: null },
          ...{ end: { afterS: 300, whenConverged: { band: 1, forS: 20 }, when: null }, invalidForS: 10 },
        },
      },
    ],
    edges: [{ id: 'e', from: 'start', port: 'done', to: 'survey' }],
  },
};

describe('an experiment of an earlier release', () => {
  const migrated = migrateExperiment(stored as unknown as ExperimentContent);

  it('has the form of today, and nothing of it is lost', () => {
    expect(experimentContentSchema.parse(migrated)).toEqual(migrated);
    const [, survey, seek] = migrated.graph.steps;
    expect(survey).toMatchObject({ id: 'survey', title: 'Look', position });
    expect(survey?.parameters).toEqual({
      actuators: [
        { channel: 'airTrim', from: 14, to: { expression: '60 + 2' }, points: 13, isUpAndDown: true },
      ],
      settleS: 0.8,
      averageS: 0.6,
      choose: 'highest',
    });
    expect(seek?.parameters).toEqual({
      law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.5, taper: null } },
      actuators: [
        {
          ...{ channel: 'airTrim', min: 12, max: null, amplitude: 1.2, periodS: { expression: '2.5' } },
          ...{ phaseDeg: 10, dither: 'sine', measuredChannel: null, gain: best, speedMax: null, own: {} },
        },
      ],
      constraint: null,
      wideSearch: null,
      end: { afterS: 300, whenConverged: { band: 1, forS: 20 }, when: null },
      invalidForS: 10,
    });
    expect(migrated.graph.edges).toBe(stored.graph.edges);
  });

  it('comes out the same where it is migrated twice', () => {
    expect(migrateExperiment(migrated)).toBe(migrated);
  });
});

describe('what is no experiment of an earlier release', () => {
  it('is left alone', () => {
    const graph = testChain(testSurvey(), testSeek(), testStep('hold'));
    const content: ExperimentContent = { title: 'X', objectiveId: null, graph };
    expect(migrateExperiment(content)).toBe(content);
    for (const other of [
      null,
      7,
      'x',
      [],
      { graph: null },
      { graph: { steps: 3 } },
      { graph: { steps: [null, 1] } },
    ]) {
      expect(migrateExperiment(other)).toBe(other);
    }
  });
});
