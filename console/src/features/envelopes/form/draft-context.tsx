import { createContext, useContext, useMemo, useState, type ReactNode } from 'react';
import type { EnvelopeContent, Rig } from '@cresthold/shared';
import type { ApiProblem } from '../../../api/index.js';
import { checkDraft, fieldName, valueAt, withValue, type FieldPath, type FormValue } from './draft-values.js';

export interface DraftForm {
  rig: Rig;
  /** The envelope is only shown. */
  isReadOnly: boolean;
  value: FormValue;
  setValue: (path: FieldPath, value: FormValue) => void;
  faultAt: (path: FieldPath) => string | undefined;
}

const DraftContext = createContext<DraftForm | null>(null);

export function DraftProvider({ form, children }: { form: DraftForm; children: ReactNode }) {
  return <DraftContext value={form}>{children}</DraftContext>;
}

export function useDraft(): DraftForm {
  const form = useContext(DraftContext);
  if (!form) throw new Error('A field of an envelope was drawn outside its form.');
  return form;
}

/** The rows of one of the lists, and how to add and take away. */
export function useDraftList(name: string) {
  const { value, setValue } = useDraft();
  const rows = valueAt(value, [name]);
  const list = Array.isArray(rows) ? rows : [];
  return {
    rows: list,
    add: (row: FormValue) => setValue([name], [...list, row]),
    remove: (index: number) =>
      setValue(
        [name],
        list.filter((_, at) => at !== index),
      ),
  };
}

export const asForm = (content: EnvelopeContent): FormValue => content;

/** State of an envelope being edited. Faults show once saving was tried, then as they come and go. */
export function useDraftForm(rig: Rig, initial: EnvelopeContent, problem: ApiProblem | null) {
  const [value, setWhole] = useState<FormValue>(() => asForm(initial));
  const [isTried, setTried] = useState(false);
  const checked = useMemo(() => checkDraft(value), [value]);
  const form: DraftForm = {
    rig,
    isReadOnly: false,
    value,
    setValue: (path, leaf) => setWhole((before) => withValue(before, path, leaf)),
    faultAt: (path) => {
      const name = fieldName(path);
      const own = isTried && !checked.isOk ? checked.faults.get(name) : undefined;
      return own ?? problem?.fieldMessage(name);
    },
  };
  return { form, checked, isTried, tryNow: () => setTried(true), isChanged: value !== asForm(initial) };
}
