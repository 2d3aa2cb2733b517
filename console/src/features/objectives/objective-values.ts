import { objectiveContentSchema, type ObjectiveContent } from '@cresthold/shared';

export const emptyObjective: ObjectiveContent = {
  title: '',
  direction: 'maximise',
  expression: '',
  unit: '',
  validity: [],
};

/** The first fault of each field by its name; empty where the objective is sound. */
export function objectiveFaults(content: ObjectiveContent): ReadonlyMap<string, string> {
  const faults = new Map<string, string>();
  const parsed = objectiveContentSchema.safeParse(content);
  for (const issue of parsed.error?.issues ?? []) {
    const name = issue.path
      .map((part, index) =>
        typeof part === 'number' ? `[${part}]` : `${index > 0 ? '.' : ''}${String(part)}`,
      )
      .join('');
    if (!faults.has(name)) faults.set(name, issue.code === 'too_small' ? 'Fill this in.' : issue.message);
  }
  return faults;
}
