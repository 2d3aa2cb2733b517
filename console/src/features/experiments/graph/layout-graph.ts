import type { ExperimentGraph } from '@cresthold/shared';

const columnWidth = 260;
const rowHeight = 170;

/**
 * Lays steps out in columns by their distance from Start, along the longest way, so that every edge of a
 * graph without cycles points right. Steps that Start does not reach stand in a row of their own below.
 */
export function layoutGraph(graph: ExperimentGraph): ExperimentGraph {
  const columns = longestDistances(graph);
  const usedRows = new Map<number, number>();
  const deepest = Math.max(0, ...countPerColumn(columns).values());
  let stray = 0;
  return {
    ...graph,
    steps: graph.steps.map((step) => {
      const column = columns.get(step.id);
      if (column === undefined) {
        return { ...step, position: { x: columnWidth * stray++, y: rowHeight * deepest } };
      }
      const row = usedRows.get(column) ?? 0;
      usedRows.set(column, row + 1);
      return { ...step, position: { x: columnWidth * column, y: rowHeight * row } };
    }),
  };
}

/** Longest number of edges from Start; bounded by the number of steps, so that a cycle ends too. */
function longestDistances(graph: ExperimentGraph): Map<string, number> {
  const distances = new Map<string, number>();
  for (const step of graph.steps) if (step.kind === 'start') distances.set(step.id, 0);
  for (let round = 1; round < graph.steps.length; round += 1) {
    let isChanged = false;
    for (const edge of graph.edges) {
      const from = distances.get(edge.from);
      if (from === undefined || !graph.steps.some((step) => step.id === edge.to)) continue;
      if (from + 1 > (distances.get(edge.to) ?? -1) && from + 1 < graph.steps.length) {
        distances.set(edge.to, from + 1);
        isChanged = true;
      }
    }
    if (!isChanged) break;
  }
  return distances;
}

function countPerColumn(columns: ReadonlyMap<string, number>): Map<number, number> {
  const counts = new Map<number, number>();
  for (const column of columns.values()) counts.set(column, (counts.get(column) ?? 0) + 1);
  return counts;
}
