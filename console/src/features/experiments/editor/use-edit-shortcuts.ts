import { useEffect, useRef } from 'react';
import { copyStep } from './editor-toolbar.js';
import type { ExperimentDraft } from './use-experiment-draft.js';

const isTyping = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName));

/** Ctrl+Z, Ctrl+Shift+Z or Ctrl+Y, and Ctrl+D, but never while somebody types into a field. */
export function useEditShortcuts(draft: ExperimentDraft, isReadOnly: boolean): void {
  const latest = useRef(draft);
  useEffect(() => {
    latest.current = draft;
  });
  useEffect(() => {
    if (isReadOnly) return;
    const onKeyDown = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || isTyping(event.target)) return;
      const key = event.key.toLowerCase();
      const { chosenStep, dispatch } = latest.current;
      if (key === 'z') dispatch({ type: event.shiftKey ? 'redo' : 'undo' });
      else if (key === 'y') dispatch({ type: 'redo' });
      else if (key === 'd' && chosenStep && chosenStep.kind !== 'start')
        copyStep(latest.current, chosenStep.id);
      else return;
      event.preventDefault();
    };
    window.addEventListener('keydown', onKeyDown);
    return () => window.removeEventListener('keydown', onKeyDown);
  }, [isReadOnly]);
}
