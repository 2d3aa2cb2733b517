import type { ExperimentContent } from '@cresthold/shared';

export interface SeekPlan {
  objectiveId: string;
  /** Where the seek begins, % of air trim. */
  startAt: number;
  seekForS: number;
  /** Points of the survey; 0 leaves it out. */
  surveyPoints: number;
}

/** Survey → move → seek → check, sized for the burner at twice its speed: its lag of 0.5 s turns the dither by 51.5°, of which the washout makes up 16.7°. */
export function seekExperiment(plan: SeekPlan): ExperimentContent {
  const { objectiveId, startAt, seekForS, surveyPoints } = plan;
  const isSurveyed = surveyPoints > 0;
  const position = { x: 0, y: 0 };
  const survey = {
    kind: 'survey' as const,
    id: 'survey',
    title: '',
    position,
    parameters: {
      actuators: [
        { channel: 'airTrim', from: 16, to: 64, points: Math.max(surveyPoints, 3), isUpAndDown: false },
      ],
      settleS: 1.2,
      averageS: 0.2,
      choose: 'highest' as const,
    },
  };
  const edges = isSurveyed
    ? [edge('start', 'done', 'survey'), edge('survey', 'done', 'move')]
    : [edge('start', 'done', 'move')];
  return {
    title: 'Seek the best air trim',
    objectiveId,
    graph: {
      steps: [
        { kind: 'start', id: 'start', title: '', position, parameters: {} },
        ...(isSurveyed ? [survey] : []),
        {
          kind: 'move',
          id: 'move',
          title: '',
          position,
          parameters: { targets: [{ channel: 'airTrim', value: startAt }], rampS: 1, timeoutS: 20 },
        },
        {
          kind: 'seek',
          id: 'seek',
          title: '',
          position,
          parameters: {
            law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.5, taper: null } },
            actuators: [
              {
                channel: 'airTrim',
                min: 12,
                max: 75,
                amplitude: 1.2,
                periodS: 2.5,
                phaseDeg: 35,
                dither: 'sine',
                measuredChannel: null,
                gain: 12,
                speedMax: null,
                own: {},
              },
            ],
            constraint: null,
            wideSearch: null,
            end: { afterS: seekForS, whenConverged: null, when: null },
            invalidForS: 10,
          },
        },
        {
          kind: 'check',
          id: 'check',
          title: '',
          position,
          parameters: { criterion: 'seek.objective > seek.objectiveAtStart' },
        },
        { kind: 'finish', id: 'finish', title: '', position, parameters: {} },
      ],
      edges: [
        ...edges,
        edge('move', 'done', 'seek'),
        edge('seek', 'done', 'check'),
        edge('check', 'yes', 'finish'),
        edge('check', 'no', 'finish'),
      ],
    },
  };
}

function edge(from: string, port: string, to: string) {
  return { id: `${from}-${port}`, from, port, to };
}
