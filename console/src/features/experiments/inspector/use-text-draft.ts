import { useState } from 'react';

export interface TextDraft {
  text: string;
  /** What is wrong with the text as it stands; null while it is taken or still being typed. */
  fault: string | null;
  setText: (text: string) => void;
  /** Takes the text over; called when the field is left or Enter pressed. */
  commit: () => void;
}

/**
 * The text of a field while it is typed. It is taken over when the field is left; what cannot be taken
 * stays in the field with its fault, and the document keeps its old value.
 *
 * @param shown the document's value as text; when it changes, the draft follows
 * @param take gives the fault, or null where the text was taken
 */
export function useTextDraft(shown: string, take: (text: string) => string | null): TextDraft {
  const [draft, setDraft] = useState({ shown, text: shown, fault: null as string | null });
  // A change from outside (undo, another step) goes before what was typed.
  const isOverridden = draft.shown !== shown;
  const current = isOverridden ? { shown, text: shown, fault: null } : draft;
  if (isOverridden) setDraft(current);
  return {
    text: current.text,
    fault: current.fault,
    setText: (text) => setDraft({ ...current, text, fault: null }),
    commit: () => {
      if (current.text !== shown) setDraft({ ...current, fault: take(current.text) });
    },
  };
}
