import type { Edge, ExperimentGraph, Step } from './experiment.schema.js';
import { resultNames, stepKinds } from './step-kinds.js';

/** What follows from the edges of a graph; edges with an unknown end or port are left out. */
export interface StepOrder {
  /** Steps by id; the first where an id is used twice. */
  readonly steps: ReadonlyMap<string, Step>;
  readonly start: Step | null;
  /** Where a port leads; undefined where it has no edge. The first edge where it has several. */
  next(stepId: string, port: string): string | undefined;
  /** Steps that a run can come to. */
  readonly reachable: ReadonlySet<string>;
  /** Results that are there whenever the step begins, by whatever way the run came. */
  resultsBefore(stepId: string): ReadonlySet<string>;
  /** Groups of steps that lead back to themselves. */
  readonly cycles: readonly (readonly string[])[];
}

/** Reads a graph, however faulty; a step left by `failed` counts as having left no results. */
export function orderSteps(graph: ExperimentGraph): StepOrder {
  const steps = new Map<string, Step>();
  for (const step of graph.steps) if (!steps.has(step.id)) steps.set(step.id, step);
  const leaving = soundEdges(graph, steps);
  const start = graph.steps.find((step) => step.kind === 'start') ?? null;
  const order = start ? forwardOrder(start.id, leaving) : [];
  const results = resultsBeforeAll(steps, order, leaving);
  return {
    steps,
    start,
    reachable: new Set(order),
    cycles: cyclesOf([...steps.keys()], leaving),
    next: (stepId, port) => leaving.get(stepId)?.find((edge) => edge.port === port)?.to,
    resultsBefore: (stepId) => results.get(stepId) ?? new Set(),
  };
}

/** Sound edges by the step that they leave. */
type Leaving = ReadonlyMap<string, readonly Edge[]>;

function soundEdges(graph: ExperimentGraph, steps: ReadonlyMap<string, Step>): Leaving {
  const leaving = new Map<string, Edge[]>();
  for (const step of steps.values()) leaving.set(step.id, []);
  for (const edge of graph.edges) {
    const from = steps.get(edge.from);
    const isSound =
      from !== undefined && steps.has(edge.to) && stepKinds[from.kind].ports.includes(edge.port);
    if (isSound) leaving.get(edge.from)?.push(edge);
  }
  return leaving;
}

/** A step and all that can be come to from it; without cycles each stands behind all that lead to it. */
function forwardOrder(stepId: string, leaving: Leaving): string[] {
  const seen = new Set<string>();
  const backward: string[] = [];
  const visit = (id: string): void => {
    if (seen.has(id)) return;
    seen.add(id);
    for (const { to } of leaving.get(id) ?? []) visit(to);
    backward.push(id);
  };
  visit(stepId);
  return backward.reverse();
}

/** Steps that can be come to from a step over at least one edge. */
function reachFrom(stepId: string, leaving: Leaving): Set<string> {
  const found = new Set<string>();
  for (const { to } of leaving.get(stepId) ?? []) found.add(to);
  // A set is walked in the order in which it grows.
  for (const id of found) for (const { to } of leaving.get(id) ?? []) found.add(to);
  return found;
}

function cyclesOf(stepIds: readonly string[], leaving: Leaving): string[][] {
  const reach = new Map(stepIds.map((id) => [id, reachFrom(id, leaving)]));
  const grouped = new Set<string>();
  const cycles: string[][] = [];
  for (const id of stepIds) {
    const ahead = reach.get(id);
    if (grouped.has(id) || !ahead?.has(id)) continue;
    const group = stepIds.filter((other) => ahead.has(other) && reach.get(other)?.has(id));
    group.forEach((member) => grouped.add(member));
    cycles.push(group);
  }
  return cycles;
}

/**
 * The results that every way to a step has passed: the greatest solution of
 * before(s) = ⋂ over edges p→s of (before(p) ∪ results of p).
 *
 * @param order reachable steps in forward order
 */
function resultsBeforeAll(
  steps: ReadonlyMap<string, Step>,
  order: readonly string[],
  leaving: Leaving,
): Map<string, Set<string>> {
  const left = new Map([...steps].map(([id, step]) => [id, new Set(resultNames(step))]));
  const before = new Map<string, Set<string>>();
  if (order[0] !== undefined) before.set(order[0], new Set());
  // Each set is born from the first edge that comes to it and only shrinks from then on.
  for (let isChanged = true; isChanged;) {
    isChanged = false;
    for (const id of order) {
      for (const { port, to } of leaving.get(id) ?? []) {
        const gained = port === 'failed' ? [] : (left.get(id) ?? []);
        const come = new Set([...(before.get(id) ?? []), ...gained]);
        const known = before.get(to);
        if (!known) before.set(to, come);
        else for (const name of known) if (!come.has(name) && known.delete(name)) isChanged = true;
      }
    }
  }
  return before;
}
