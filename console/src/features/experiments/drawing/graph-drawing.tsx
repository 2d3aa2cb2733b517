import { useMemo, useState } from 'react';
import Box from '@mui/material/Box';
import {
  applyNodeChanges,
  Background,
  BackgroundVariant,
  Controls,
  MarkerType,
  ReactFlow,
  type Connection,
  type NodeChange,
} from '@xyflow/react';
import '@xyflow/react/dist/base.css';
import type { ExperimentGraph, PreflightFault, Rig } from '@cresthold/shared';
import { toEdges, toNodes, type StepFlowNode } from '../graph/graph-mapper.js';
import { drawingStyles } from './drawing-styles.js';
import { StepNode } from './step-node.js';

const nodeTypes = { step: StepNode };
const defaultEdgeOptions = { markerEnd: { type: MarkerType.Arrow, width: 18, height: 18 } };
const noFaults: readonly PreflightFault[] = [];
const noSteps: readonly string[] = [];

export interface GraphEdits {
  onMove: (id: string, position: { x: number; y: number }) => void;
  onConnect: (from: string, port: string, to: string) => void;
  onRemove: (stepIds: ReadonlySet<string>, edgeIds: ReadonlySet<string>) => void;
  onChoose: (stepId: string | null) => void;
}

interface GraphDrawingProps {
  graph: ExperimentGraph;
  rig: Rig;
  faults?: readonly PreflightFault[];
  activeSteps?: readonly string[];
  chosenStep?: string | null;
  heightPx: number | string;
  /** Absent: the drawing is only looked at. */
  edits?: GraphEdits;
}

/** The experiment as a drawing; edits go out as calls, the graph that comes in is what is drawn. */
export function GraphDrawing({ heightPx, edits, chosenStep = null, ...drawing }: GraphDrawingProps) {
  const { graph, rig, faults = noFaults, activeSteps = noSteps } = drawing;
  const wanted = useMemo(
    () => toNodes({ graph, rig, faults, activeSteps }),
    [graph, rig, faults, activeSteps],
  );
  const edges = useMemo(() => toEdges(graph), [graph]);
  const [nodes, setNodes] = useFollowingNodes(wanted, chosenStep);
  const onNodesChange = (changes: NodeChange<StepFlowNode>[]) => {
    setNodes((old) => applyNodeChanges(changes, old));
    for (const change of changes) {
      if (change.type === 'position' && change.dragging === false && change.position) {
        edits?.onMove(change.id, change.position);
      }
      // Only what a person chose comes this way; `chosenStep` is what is chosen.
      if (change.type === 'select' && change.selected) edits?.onChoose(change.id);
    }
  };
  return (
    <Box sx={[drawingStyles, { height: heightPx, border: 1, borderColor: 'divider' }]}>
      <ReactFlow
        nodes={nodes}
        edges={edges}
        nodeTypes={nodeTypes}
        defaultEdgeOptions={defaultEdgeOptions}
        onNodesChange={onNodesChange}
        onConnect={(connection) => announce(connection, edits)}
        onPaneClick={() => edits?.onChoose(null)}
        onBeforeDelete={({ nodes: gone, edges: cut }) => {
          edits?.onRemove(new Set(gone.map((node) => node.id)), new Set(cut.map((edge) => edge.id)));
          // The graph without them comes back as a property.
          return Promise.resolve(false);
        }}
        deleteKeyCode={edits ? ['Delete', 'Backspace'] : null}
        nodesDraggable={edits !== undefined}
        nodesConnectable={edits !== undefined}
        elementsSelectable={edits !== undefined}
        nodesFocusable={edits !== undefined}
        edgesFocusable={edits !== undefined}
        snapToGrid
        snapGrid={[20, 20]}
        minZoom={0.2}
        fitView
        fitViewOptions={{ padding: 0.1, maxZoom: 1 }}
        preventScrolling={edits !== undefined}
        aria-label="Drawing of the experiment"
      >
        <Background variant={BackgroundVariant.Lines} gap={20} lineWidth={1} />
        <Controls showInteractive={false} />
      </ReactFlow>
    </Box>
  );
}

function announce({ source, sourceHandle, target }: Connection, edits?: GraphEdits): void {
  if (sourceHandle !== null) edits?.onConnect(source, sourceHandle, target);
}

/** The library's own state of the nodes (measures, a drag under way), which follows the graph when that changes. */
function useFollowingNodes(wanted: readonly StepFlowNode[], chosenStep: string | null) {
  const [state, setState] = useState(() => ({ wanted, chosenStep, nodes: [...wanted] }));
  const isBehind = state.wanted !== wanted || state.chosenStep !== chosenStep;
  const current = isBehind
    ? { wanted, chosenStep, nodes: withMeasures(wanted, state.nodes, chosenStep) }
    : state;
  if (isBehind) setState(current);
  const setNodes = (change: (nodes: StepFlowNode[]) => StepFlowNode[]) =>
    setState((old) => ({ ...old, nodes: change(old.nodes) }));
  return [current.nodes, setNodes] as const;
}

/** What the library measured stays with a node that is drawn anew. */
function withMeasures(
  wanted: readonly StepFlowNode[],
  old: readonly StepFlowNode[],
  chosenStep: string | null,
): StepFlowNode[] {
  const known = new Map(old.map((node) => [node.id, node]));
  return wanted.map((node) => {
    const measured = known.get(node.id)?.measured;
    const kept = measured ? { ...node, measured } : node;
    return { ...kept, selected: node.id === chosenStep };
  });
}
