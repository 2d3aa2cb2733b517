import { stepKinds, type Edge, type ExperimentGraph, type Step } from '@cresthold/shared';
import { freeStepId } from './new-step.js';

/** Pure edits of an experiment graph: each gives a new graph and leaves the old one as it was. */

export function addStep(graph: ExperimentGraph, step: Step): ExperimentGraph {
  return { ...graph, steps: [...graph.steps, step] };
}

export function replaceStep(graph: ExperimentGraph, step: Step): ExperimentGraph {
  return { ...graph, steps: graph.steps.map((other) => (other.id === step.id ? step : other)) };
}

export function moveStep(
  graph: ExperimentGraph,
  id: string,
  position: { x: number; y: number },
): ExperimentGraph {
  return { ...graph, steps: graph.steps.map((step) => (step.id === id ? { ...step, position } : step)) };
}

/** Renames a step with its edges. Expressions that name its results are left as they are: preflight finds them. */
export function renameStep(graph: ExperimentGraph, id: string, newId: string): ExperimentGraph {
  return {
    steps: graph.steps.map((step) => (step.id === id ? { ...step, id: newId } : step)),
    edges: graph.edges.map((edge) => {
      const from = edge.from === id ? newId : edge.from;
      return { id: edgeId(from, edge.port), from, port: edge.port, to: edge.to === id ? newId : edge.to };
    }),
  };
}

/** Connects an outcome to a step; an outcome leads to one step only, so an older edge of that port goes. */
export function connect(graph: ExperimentGraph, from: string, port: string, to: string): ExperimentGraph {
  const step = graph.steps.find((other) => other.id === from);
  const target = graph.steps.find((other) => other.id === to);
  if (!step || !target || from === to || target.kind === 'start') return graph;
  if (!stepKinds[step.kind].ports.includes(port)) return graph;
  const edge: Edge = { id: edgeId(from, port), from, port, to };
  const others = graph.edges.filter((other) => other.from !== from || other.port !== port);
  return { ...graph, edges: [...others, edge] };
}

/** Removes steps with their edges, and edges. */
export function remove(
  graph: ExperimentGraph,
  stepIds: ReadonlySet<string>,
  edgeIds: ReadonlySet<string>,
): ExperimentGraph {
  return {
    steps: graph.steps.filter((step) => !stepIds.has(step.id)),
    edges: graph.edges.filter(
      (edge) => !edgeIds.has(edge.id) && !stepIds.has(edge.from) && !stepIds.has(edge.to),
    ),
  };
}

/** Copies of steps with fresh ids, a little beside the originals, with the edges among them. */
export function duplicate(
  graph: ExperimentGraph,
  stepIds: ReadonlySet<string>,
): { graph: ExperimentGraph; copies: string[] } {
  const newIds = new Map<string, string>();
  let next = graph;
  for (const step of graph.steps) {
    if (!stepIds.has(step.id)) continue;
    const id = freeStepId(step.id, next);
    newIds.set(step.id, id);
    next = addStep(next, { ...step, id, position: { x: step.position.x + 40, y: step.position.y + 40 } });
  }
  for (const edge of graph.edges) {
    const from = newIds.get(edge.from);
    const to = newIds.get(edge.to);
    if (from && to) next = connect(next, from, edge.port, to);
  }
  return { graph: next, copies: [...newIds.values()] };
}

/** Takes the edge of an outcome away. */
export function disconnect(graph: ExperimentGraph, from: string, port: string): ExperimentGraph {
  return { ...graph, edges: graph.edges.filter((edge) => edge.from !== from || edge.port !== port) };
}

/** Where an outcome leads; null where it leads nowhere. */
export function targetOf(graph: ExperimentGraph, from: string, port: string): string | null {
  return graph.edges.find((edge) => edge.from === from && edge.port === port)?.to ?? null;
}

export function edgeId(from: string, port: string): string {
  return `${from}.${port}`;
}
