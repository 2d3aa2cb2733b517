import { createContext, useContext } from 'react';

export interface FormContextValue {
  isReadOnly: boolean;
  /** What is wrong with the field at this path; undefined where nothing is known to be. */
  faultAt: (path: string) => string | undefined;
}

const FormContext = createContext<FormContextValue>({ isReadOnly: false, faultAt: () => undefined });

export const FormContextProvider = FormContext.Provider;

export function useFormContext(): FormContextValue {
  return useContext(FormContext);
}

/** One field where it stands, with what it holds. */
export interface FieldProps<Field> {
  field: Field;
  /** Where it is, as the server's faults name it. */
  path: string;
  value: unknown;
  /** Undefined takes the value out. */
  onChange: (value: unknown) => void;
}
