import { experimentGraphSchema, type ExperimentGraph, type Rig, type StepKind } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { addStep, connect, duplicate, remove, renameStep } from './edit-graph.js';
import { beginHistory, record, redo, undo } from '../../../components/index.js';
import { layoutGraph } from './layout-graph.js';
import { newStep } from './new-step.js';

const display = { min: 0, max: 100, decimals: 1 };
const rig: Rig = {
  id: 'burner-1',
  title: 'Burner 1',
  description: '',
  isBench: false,
  periodMs: 50,
  connections: [{ id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} }],
  channels: [
    {
      kind: 'actuator',
      id: 'airTrim',
      title: 'Air trim',
      unit: '%',
      display,
      connection: 'plc',
      address: {},
    },
    { kind: 'sensor', id: 'o2', title: 'Oxygen', unit: '%', display, connection: 'plc', address: {} },
  ],
};
const defaults = { rig, rangeOf: () => ({ min: 10, max: 80 }) };
const empty: ExperimentGraph = { steps: [], edges: [] };
const withSteps = (...kinds: StepKind[]) =>
  kinds.reduce((graph, kind) => addStep(graph, newStep(kind, graph, { x: 0, y: 0 }, defaults)), empty);

describe('a fresh step', () => {
  it('of every kind is a valid document', () => {
    const graph = withSteps('start', 'move', 'settle', 'hold', 'survey', 'seek', 'check', 'finish');
    expect(experimentGraphSchema.safeParse(graph).error).toBeUndefined();
  });

  it('gets an id of its own', () => {
    expect(withSteps('seek', 'seek', 'seek').steps.map((step) => step.id)).toEqual([
      'seek',
      'seek2',
      'seek3',
    ]);
  });
});

describe('edits', () => {
  it('keep one edge per outcome', () => {
    let graph = withSteps('start', 'hold', 'finish');
    graph = connect(connect(graph, 'start', 'done', 'hold'), 'start', 'done', 'finish');
    expect(graph.edges).toEqual([{ id: 'start.done', from: 'start', port: 'done', to: 'finish' }]);
  });

  it('refuse an edge into Start, to itself, or from a port that the step has not', () => {
    const graph = withSteps('start', 'hold');
    expect(connect(graph, 'hold', 'done', 'start')).toBe(graph);
    expect(connect(graph, 'hold', 'done', 'hold')).toBe(graph);
    expect(connect(graph, 'start', 'timeout', 'hold')).toBe(graph);
  });

  it('take the edges of a removed step along, and rename edges with their step', () => {
    let graph = withSteps('start', 'hold', 'finish');
    graph = connect(connect(graph, 'start', 'done', 'hold'), 'hold', 'done', 'finish');
    expect(remove(graph, new Set(['hold']), new Set()).edges).toEqual([]);
    expect(renameStep(graph, 'hold', 'wait').edges.map((edge) => `${edge.from}→${edge.to}`)).toEqual([
      'start→wait',
      'wait→finish',
    ]);
  });

  it('copy steps with the edges among them', () => {
    let graph = withSteps('start', 'hold', 'check');
    graph = connect(connect(graph, 'start', 'done', 'hold'), 'hold', 'done', 'check');
    const { graph: next, copies } = duplicate(graph, new Set(['hold', 'check']));
    expect(copies).toEqual(['hold2', 'check2']);
    expect(next.edges.map((edge) => edge.id)).toContain('hold2.done');
    expect(next.edges).toHaveLength(3);
  });
});

describe('layout', () => {
  it('lets every edge point right', () => {
    let graph = withSteps('start', 'hold', 'check', 'finish');
    graph = connect(connect(graph, 'start', 'done', 'hold'), 'hold', 'done', 'check');
    graph = connect(connect(graph, 'check', 'yes', 'finish'), 'start', 'done', 'hold');
    const laid = layoutGraph(graph);
    const x = (id: string) => laid.steps.find((step) => step.id === id)?.position.x ?? NaN;
    for (const edge of laid.edges) expect(x(edge.to)).toBeGreaterThan(x(edge.from));
  });

  it('ends on a cycle', () => {
    let graph = withSteps('start', 'hold', 'settle');
    graph = connect(connect(graph, 'start', 'done', 'hold'), 'hold', 'done', 'settle');
    graph = connect(graph, 'settle', 'done', 'hold');
    expect(layoutGraph(graph).steps).toHaveLength(3);
  });
});

describe('history', () => {
  it('undoes and redoes, and forgets what was undone once something new is recorded', () => {
    let history = record(record(beginHistory('a'), 'b'), 'c');
    history = undo(history);
    expect(history.present).toBe('b');
    expect(redo(history).present).toBe('c');
    history = record(history, 'd');
    expect(redo(history).present).toBe('d');
    expect(undo(undo(undo(history))).present).toBe('a');
  });
});
