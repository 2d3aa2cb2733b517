import { useReducer } from 'react';
import type { ExperimentContent, ExperimentGraph } from '@cresthold/shared';
import { beginHistory, record, redo, undo, type History } from '../../../components/index.js';

interface DraftState {
  history: History<ExperimentContent>;
  chosenStep: string | null;
}

type DraftAction =
  | { type: 'change'; content: ExperimentContent }
  | { type: 'change-graph'; graph: ExperimentGraph; chosenStep?: string | null }
  | { type: 'undo' }
  | { type: 'redo' }
  | { type: 'choose'; stepId: string | null }
  | { type: 'load'; content: ExperimentContent };

function reduce(state: DraftState, action: DraftAction): DraftState {
  switch (action.type) {
    case 'change':
      return { ...state, history: record(state.history, action.content) };
    case 'change-graph': {
      const { present } = state.history;
      if (action.graph === present.graph) return state;
      const history = record(state.history, { ...present, graph: action.graph });
      return settle({ history, chosenStep: action.chosenStep ?? state.chosenStep });
    }
    case 'undo':
      return settle({ ...state, history: undo(state.history) });
    case 'redo':
      return settle({ ...state, history: redo(state.history) });
    case 'choose':
      return state.chosenStep === action.stepId ? state : { ...state, chosenStep: action.stepId };
    case 'load':
      return { history: beginHistory(action.content), chosenStep: null };
  }
}

/** A step that is no longer there cannot stay chosen. */
function settle(state: DraftState): DraftState {
  const isThere = state.history.present.graph.steps.some((step) => step.id === state.chosenStep);
  return isThere ? state : { ...state, chosenStep: null };
}

/** The experiment as it is being edited, with undo, redo and the chosen step. */
export function useExperimentDraft(saved: ExperimentContent) {
  const [state, dispatch] = useReducer(reduce, saved, (content) => ({
    history: beginHistory(content),
    chosenStep: null,
  }));
  const content = state.history.present;
  return {
    content,
    chosenStep: content.graph.steps.find((step) => step.id === state.chosenStep) ?? null,
    canUndo: state.history.past.length > 0,
    canRedo: state.history.future.length > 0,
    dispatch,
  };
}

export type ExperimentDraft = ReturnType<typeof useExperimentDraft>;
