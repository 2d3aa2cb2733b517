import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { layoutGraph } from '../graph/layout-graph.js';
import { duplicate } from '../graph/edit-graph.js';
import type { ExperimentDraft } from './use-experiment-draft.js';

interface EditorToolbarProps {
  draft: ExperimentDraft;
  isReadOnly: boolean;
}

/** Undo, redo, copy, arrange; the shortcuts are handled by the editor around it. */
export function EditorToolbar({ draft, isReadOnly }: EditorToolbarProps) {
  const { content, chosenStep, canUndo, canRedo, dispatch } = draft;
  return (
    <Box role="toolbar" aria-label="Editing" sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
      <Button disabled={!canUndo} onClick={() => dispatch({ type: 'undo' })} title="Ctrl+Z">
        Undo
      </Button>
      <Button disabled={!canRedo} onClick={() => dispatch({ type: 'redo' })} title="Ctrl+Shift+Z">
        Redo
      </Button>
      <Button
        disabled={isReadOnly || chosenStep === null || chosenStep.kind === 'start'}
        onClick={() => {
          if (chosenStep) copyStep(draft, chosenStep.id);
        }}
        title="Ctrl+D"
      >
        Copy step
      </Button>
      <Button
        disabled={isReadOnly}
        onClick={() => dispatch({ type: 'change-graph', graph: layoutGraph(content.graph) })}
      >
        Arrange
      </Button>
    </Box>
  );
}

/** Puts a copy of a step beside it and chooses the copy. */
export function copyStep({ content, dispatch }: ExperimentDraft, stepId: string): void {
  const { graph, copies } = duplicate(content.graph, new Set([stepId]));
  dispatch({ type: 'change-graph', graph, chosenStep: copies[0] ?? null });
}
