import { describe, expect, it } from 'vitest';
import { experimentGraphSchema, preflight, type PreflightFault, type RigStatus } from '@cresthold/shared';
import { demoEnvelope, demoRig, demoStatus } from '../../../testing/documents.js';
import { targetOf } from '../graph/edit-graph.js';
import { startingGraph } from '../graph/starting-graphs.js';
import { lastName } from '../inspector/parameter-field.js';
import { addAfter } from './add-step.js';
import { preflightTitle } from './preflight-panel.js';
import { startObstacle } from './start-run-button.js';

const limits = demoEnvelope.content.limits;
const defaults = {
  rig: demoRig,
  rangeOf: (channel: string) => limits.find((limit) => limit.channel === channel) ?? null,
};
const fault = (severity: PreflightFault['severity']): PreflightFault => ({
  severity,
  code: 'preflight.dangling-port',
  step: 'seek',
  field: 'ports.done',
  message: 'Lead it somewhere.',
});

describe('what a new experiment begins with', () => {
  it('is sound and runs through: preflight finds no error of structure', () => {
    const graph = startingGraph('seek', defaults);
    expect(experimentGraphSchema.safeParse(graph).success).toBe(true);
    const objective = {
      title: 'x',
      direction: 'maximise' as const,
      expression: 'o2',
      unit: '',
      validity: [],
    };
    const faults = preflight({ graph, objective, rig: demoRig, envelope: demoEnvelope.content });
    expect(faults.filter(({ severity }) => severity === 'error')).toEqual([]);
  });
});

describe('adding a step', () => {
  it('leads the chosen step’s open outcome to it and puts it where no other stands', () => {
    let graph = startingGraph('empty', defaults);
    graph = { ...graph, edges: [] };
    const first = addAfter(graph, 'hold', 'start', defaults);
    expect(targetOf(first.graph, 'start', 'done')).toBe('hold');
    const second = addAfter(first.graph, 'hold', 'start', defaults);
    expect(targetOf(second.graph, 'start', 'done')).toBe('hold');
    const places = second.graph.steps.map(({ position }) => `${position.x},${position.y}`);
    expect(new Set(places).size).toBe(places.length);
  });

  it('leads nowhere where nothing is chosen', () => {
    const { graph, added } = addAfter(startingGraph('empty', defaults), 'check', null, defaults);
    expect(graph.edges.some((edge) => edge.to === added)).toBe(false);
  });
});

describe('the start of a run', () => {
  const status = (phase: RigStatus['phase']): RigStatus => ({ ...demoStatus, phase });

  it('is open only when saved, sound and armed', () => {
    expect(startObstacle(status('armed'), [], false)).toBeNull();
    expect(startObstacle(status('armed'), [fault('warning')], false)).toBeNull();
  });

  it('says in words what stands in its way', () => {
    expect(startObstacle(status('armed'), [], true)).toMatch(/Save/);
    expect(startObstacle(status('armed'), [fault('error')], false)).toMatch(/preflight/);
    expect(startObstacle(status('idle'), [], false)).toMatch(/not armed/);
    expect(startObstacle(status('running'), [], false)).toMatch(/busy/);
    expect(startObstacle(null, [], false)).toMatch(/not known/);
  });
});

describe('small words', () => {
  it('count what preflight found', () => {
    expect(preflightTitle([fault('error'), fault('warning'), fault('warning')])).toBe(
      'Preflight: 1 error, 2 warnings',
    );
    expect(preflightTitle([])).toBe('Preflight: nothing found');
  });

  it('complete the name at the end of an expression', () => {
    expect(lastName('2 * survey.be')).toBe('survey.be');
    expect(lastName('2 * ')).toBe('');
  });
});
