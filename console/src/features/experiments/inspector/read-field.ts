import { stepSchema, type NumericParameter, type Step } from '@cresthold/shared';
import { fieldName, withParameter, type ParameterPath } from '../graph/parameter-path.js';
import type { StepField } from './step-fields.js';

export type ReadOutcome = { isOk: true; value: unknown } | { isOk: false; message: string };

const number = (text: string): number => Number(text.trim().replace('−', '-').replace(',', '.'));

const ofOptional = {
  'optional-number': 'number',
  'optional-numeric': 'numeric',
  'optional-expression': 'expression',
} as const;

/** What was typed into a field as the document's value. */
export function readField(kind: StepField['kind'], text: string): ReadOutcome {
  const isEmpty = text.trim() === '';
  switch (kind) {
    case 'optional-number':
    case 'optional-numeric':
    case 'optional-expression':
      return isEmpty ? { isOk: true, value: null } : readField(ofOptional[kind], text);
    case 'number':
      if (isEmpty || !Number.isFinite(number(text))) return { isOk: false, message: 'Enter a number.' };
      return { isOk: true, value: number(text) };
    case 'numeric':
      if (isEmpty) return { isOk: false, message: 'Enter a number or an expression.' };
      if (Number.isFinite(number(text))) return { isOk: true, value: number(text) };
      return { isOk: true, value: { expression: text.trim() } satisfies NumericParameter };
    case 'expression':
      if (isEmpty) return { isOk: false, message: 'Enter an expression.' };
      return { isOk: true, value: text.trim() };
    case 'actuator':
    case 'channel':
    case 'choice':
    case 'switch':
    case 'presence':
      return { isOk: true, value: text };
  }
}

/** A document's value as the text of its field. */
export function fieldText(value: unknown): string {
  if (value === null || value === undefined) return '';
  if (typeof value === 'object' && 'expression' in value) return String(value.expression);
  return typeof value === 'number' || typeof value === 'string' ? String(value) : '';
}

export type StepOutcome = { isOk: true; step: Step } | { isOk: false; message: string };

/** The step with one parameter changed, judged by its schema; the fault of that field comes first. */
export function changeParameter(step: Step, path: ParameterPath, value: unknown): StepOutcome {
  const outcome = stepSchema.safeParse(withParameter(step, path, value));
  if (outcome.success) return { isOk: true, step: outcome.data };
  const wanted = fieldName(path);
  const issues = outcome.error.issues.map((issue) => ({
    field: fieldName(issue.path.slice(1).map((part) => (typeof part === 'number' ? part : String(part)))),
    message: issue.message,
  }));
  const issue = issues.find(({ field }) => field.startsWith(wanted)) ?? issues[0];
  return { isOk: false, message: issue?.message ?? 'This value cannot be taken.' };
}
