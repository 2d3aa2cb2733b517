import { stepKinds, type ExperimentGraph, type StepKind } from '@cresthold/shared';
import { addStep, connect, targetOf } from '../graph/edit-graph.js';
import { newStep, type StepDefaults } from '../graph/new-step.js';

/**
 * Adds a step at the right of the chosen one and leads the chosen one's first open outcome to it, so that
 * a sequence is built by pressing one button after the other.
 */
export function addAfter(
  graph: ExperimentGraph,
  kind: StepKind,
  chosenId: string | null,
  defaults: StepDefaults,
): { graph: ExperimentGraph; added: string } {
  const chosen = graph.steps.find((step) => step.id === chosenId);
  const step = newStep(kind, graph, freePlace(graph, chosen?.position ?? null), defaults);
  const grown = addStep(graph, step);
  const port =
    chosen && stepKinds[chosen.kind].ports.find((name) => targetOf(graph, chosen.id, name) === null);
  if (!chosen || port === undefined || kind === 'start') return { graph: grown, added: step.id };
  return { graph: connect(grown, chosen.id, port, step.id), added: step.id };
}

const columnWidth = 260;
const rowHeight = 180;

/** The first place at the right of a step, or of all steps, that no other step covers. */
function freePlace(
  graph: ExperimentGraph,
  beside: { x: number; y: number } | null,
): { x: number; y: number } {
  const rightmost = graph.steps.reduce((most, step) => Math.max(most, step.position.x), -columnWidth);
  const place = beside ? { x: beside.x + columnWidth, y: beside.y } : { x: rightmost + columnWidth, y: 0 };
  const isTaken = () =>
    graph.steps.some(
      ({ position }) =>
        Math.abs(position.x - place.x) < columnWidth - 20 && Math.abs(position.y - place.y) < rowHeight - 20,
    );
  while (isTaken()) place.y += rowHeight;
  return place;
}
