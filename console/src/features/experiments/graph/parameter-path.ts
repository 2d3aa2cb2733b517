import type { Step } from '@cresthold/shared';

/** Where a parameter is within a step's parameters: `['end', 'afterS']`. */
export type ParameterPath = readonly (string | number)[];

/** The name under which preflight and the API report faults: `parameters.targets[0].value`. */
export function fieldName(path: ParameterPath): string {
  return path.reduce<string>(
    (name, part) => (typeof part === 'number' ? `${name}[${part}]` : `${name}.${part}`),
    'parameters',
  );
}

export function valueAt(value: unknown, path: ParameterPath): unknown {
  return path.reduce<unknown>(
    (at, part) =>
      typeof at === 'object' && at !== null ? (at as Record<string | number, unknown>)[part] : undefined,
    value,
  );
}

function withValue(value: unknown, path: ParameterPath, next: unknown): unknown {
  const [part, ...rest] = path;
  if (part === undefined) return next;
  if (Array.isArray(value)) {
    return value.map((item: unknown, index) => (index === part ? withValue(item, rest, next) : item));
  }
  const object = value as Record<string | number, unknown>;
  return { ...object, [part]: withValue(object[part], rest, next) };
}

/** The step with one parameter changed; what it means is for the schema to say. */
export function withParameter(step: Step, path: ParameterPath, value: unknown): unknown {
  return { ...step, parameters: withValue(step.parameters, path, value) };
}
