import { reservedWords } from '../../expressions/expression-functions.js';
import type { Step } from '../experiment.schema.js';
import { stepKinds } from '../step-kinds.js';
import type { PreflightCase } from './fault-list.js';

/** Start, finish, ports, edges and cycles. */
export function checkStructure(c: PreflightCase): void {
  checkStart(c);
  checkIds(c);
  checkEdges(c);
  for (const step of c.order.steps.values()) checkPorts(c, step);
  checkReach(c);
  for (const cycle of c.order.cycles) {
    c.faults.error(
      'cycle',
      cycle[0] ?? null,
      null,
      `These steps lead back to themselves: ${cycle.join(', ')}. Take out an edge: a run goes forward only.`,
    );
  }
}

function checkStart({ graph, faults }: PreflightCase): void {
  const starts = graph.steps.filter((step) => step.kind === 'start');
  if (starts.length === 0) faults.error('no-start', null, null, 'There is no Start: add one and lead it on.');
  for (const extra of starts.slice(1)) {
    faults.error('several-starts', extra.id, null, 'A run begins at one Start: delete this second one.');
  }
}

function checkIds({ graph, faults }: PreflightCase): void {
  const seen = new Set<string>();
  for (const { id } of graph.steps) {
    if (seen.has(id)) {
      faults.error('duplicate-step', id, 'id', `Two steps are named "${id}": give each a name of its own.`);
    }
    if (reservedWords.has(id)) {
      faults.error('reserved-name', id, 'id', `"${id}" means something in expressions: choose another name.`);
    }
    seen.add(id);
  }
}

function checkEdges({ graph, order, faults }: PreflightCase): void {
  const used = new Set<string>();
  for (const { from, port, to } of graph.edges) {
    const source = order.steps.get(from);
    if (!source) {
      faults.error('unknown-step', null, null, `An edge comes from "${from}", which is no step: delete it.`);
      continue;
    }
    const field = `ports.${port}`;
    if (!order.steps.has(to)) {
      faults.error(
        'unknown-step',
        from,
        field,
        `The port leads to "${to}", which is no step: delete the edge.`,
      );
    }
    const { title, ports } = stepKinds[source.kind];
    if (!ports.includes(port)) {
      const known = ports.length > 0 ? `it has ${ports.join(', ')}` : 'it has none';
      faults.error('unknown-port', from, field, `${title} has no port "${port}": ${known}.`);
    }
    const key = `${from}\n${port}`;
    if (used.has(key)) {
      faults.error('two-edges', from, field, `Port "${port}" leads to two steps: keep one edge.`);
    }
    used.add(key);
  }
}

function checkPorts({ graph, faults }: PreflightCase, step: Step): void {
  const { ports, optionalPorts } = stepKinds[step.kind];
  for (const port of ports) {
    if (graph.edges.some((edge) => edge.from === step.id && edge.port === port)) continue;
    if (optionalPorts.includes(port)) {
      const ends = 'a run that leaves by it stops in order with the verdict inconclusive';
      faults.warning('open-port', step.id, `ports.${port}`, `Port "${port}" leads nowhere: ${ends}.`);
    } else {
      const todo = 'draw an edge from it to the step that follows';
      faults.error('dangling-port', step.id, `ports.${port}`, `Port "${port}" leads nowhere: ${todo}.`);
    }
  }
}

function checkReach({ order, faults }: PreflightCase): void {
  if (!order.start) return;
  const steps = [...order.steps.values()];
  for (const { id, kind } of steps) {
    if (order.reachable.has(id) || kind === 'start') continue;
    faults.error(
      'unreachable-step',
      id,
      null,
      'No run comes to this step: lead an edge to it, or delete it.',
    );
  }
  if (!steps.some((step) => step.kind === 'finish' && order.reachable.has(step.id))) {
    faults.error('no-finish', null, null, 'No way from Start leads to a Finish: add one at the end.');
  }
}
