import { z } from 'zod';
import { wireFaultSchema, type WireFaultKind } from './wire-fault.schema.js';

/** One kind of fault as a form shows it. */
export interface WireFaultForm {
  kind: WireFaultKind;
  title: string;
  /** What it does, in plain words. */
  help: string;
  /** JSON Schema of its settings, without `kind` and `channels`, which a form asks for in its own way. */
  schema: { type: 'object'; properties: Record<string, object>; required: string[] };
}

/** Every kind of fault, in the order in which they are offered. */
export const wireFaultForms: readonly WireFaultForm[] = wireFaultSchema.options.map((option) => {
  const { title, description, properties, required } = z.toJSONSchema(option, { io: 'input' });
  const rest = Object.entries(properties ?? {}).filter(([name]) => name !== 'kind' && name !== 'channels');
  return {
    kind: option.shape.kind.value,
    title: title ?? option.shape.kind.value,
    help: description ?? '',
    schema: {
      type: 'object',
      properties: Object.fromEntries(rest) as Record<string, object>,
      required: (required ?? []).filter((name) => name !== 'kind'),
    },
  };
});
