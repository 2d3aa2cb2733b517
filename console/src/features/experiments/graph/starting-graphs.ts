import type { ExperimentGraph, StepKind } from '@cresthold/shared';
import { addStep, connect } from './edit-graph.js';
import { layoutGraph } from './layout-graph.js';
import { newStep, type StepDefaults } from './new-step.js';

/** What a new experiment begins with. */
export const startingGraphs = {
  empty: { title: 'Start and Finish only', kinds: ['start', 'finish'] },
  seek: {
    title: 'Survey, move, settle, seek, check',
    kinds: ['start', 'survey', 'move', 'settle', 'seek', 'check', 'finish'],
  },
} as const satisfies Record<string, { title: string; kinds: readonly StepKind[] }>;

export type StartingGraph = keyof typeof startingGraphs;

/** The steps one after the other, each led to by the first outcome of the one before. */
export function startingGraph(which: StartingGraph, defaults: StepDefaults): ExperimentGraph {
  let graph: ExperimentGraph = { steps: [], edges: [] };
  for (const kind of startingGraphs[which].kinds) {
    graph = addStep(graph, newStep(kind, graph, { x: 0, y: 0 }, defaults));
  }
  graph.steps.forEach((step, index) => {
    const next = graph.steps[index + 1];
    if (!next) return;
    const ports =
      step.kind === 'check' ? ['yes', 'no'] : step.kind === 'settle' ? ['done', 'timeout'] : ['done'];
    for (const port of ports) graph = connect(graph, step.id, port, next.id);
  });
  return layoutGraph(graph);
}
