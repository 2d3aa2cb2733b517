import type { Edge as FlowEdge, Node as FlowNode } from '@xyflow/react';
import { stepKinds, type ExperimentGraph, type PreflightFault, type Rig, type Step } from '@cresthold/shared';
import { stepSummary } from './step-summary.js';

/** What the drawing of a step shows. */
export interface StepNodeData extends Record<string, unknown> {
  title: string;
  kindTitle: string;
  id: string;
  /** The parameters that matter most, one a line. */
  summary: string[];
  ports: readonly string[];
  hasInput: boolean;
  /** Worst preflight finding; null where there is none. */
  mark: PreflightFault['severity'] | null;
  markText: string;
  isActive: boolean;
}

export type StepFlowNode = FlowNode<StepNodeData, 'step'>;

interface Drawing {
  graph: ExperimentGraph;
  rig: Rig;
  faults: readonly PreflightFault[];
  activeSteps: readonly string[];
}

/** The graph as nodes of the drawing library. */
export function toNodes({ graph, rig, faults, activeSteps }: Drawing): StepFlowNode[] {
  return graph.steps.map((step) => ({
    id: step.id,
    type: 'step',
    position: step.position,
    ariaLabel: ariaLabel(step, faults),
    data: {
      title: step.title || stepKinds[step.kind].title,
      kindTitle: stepKinds[step.kind].title,
      id: step.id,
      summary: stepSummary(step, rig),
      ports: stepKinds[step.kind].ports,
      hasInput: step.kind !== 'start',
      ...markOf(step.id, faults),
      isActive: activeSteps.includes(step.id),
    },
  }));
}

export function toEdges(graph: ExperimentGraph): FlowEdge[] {
  return graph.edges.map((edge) => ({
    id: edge.id,
    source: edge.from,
    sourceHandle: edge.port,
    target: edge.to,
    type: 'smoothstep',
    ariaLabel: `${edge.from}, ${edge.port}, leads to ${edge.to}`,
  }));
}

function markOf(stepId: string, faults: readonly PreflightFault[]) {
  const own = faults.filter((fault) => fault.step === stepId);
  const isError = own.some((fault) => fault.severity === 'error');
  const mark: PreflightFault['severity'] | null = own.length === 0 ? null : isError ? 'error' : 'warning';
  return { mark, markText: own.map((fault) => fault.message).join(' ') };
}

function ariaLabel(step: Step, faults: readonly PreflightFault[]): string {
  const { mark, markText } = markOf(step.id, faults);
  const name = `${stepKinds[step.kind].title} step ${step.id}`;
  return mark === null ? name : `${name}, preflight ${mark}: ${markText}`;
}
