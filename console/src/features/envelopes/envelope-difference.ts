import type { EnvelopeContent } from '@cresthold/shared';
import { plainNumber } from '../../components/index.js';
import { emergencyStopFields, interlockFields, limitFields } from './envelope-fields.js';

/** One leaf that differs between two envelopes; null where it is not there. */
export interface Difference {
  where: string;
  before: string | null;
  after: string | null;
}

function say(value: string | number | boolean | null): string {
  if (value === null) return 'none';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  return typeof value === 'number' ? plainNumber(value) : value;
}

/** Every leaf of an envelope by its name in words. */
function leaves(content: EnvelopeContent, titleOf: (channel: string) => string): Map<string, string> {
  const all = new Map<string, string>();
  for (const limit of content.limits) {
    for (const { key, label } of limitFields)
      all.set(`${titleOf(limit.channel)} · ${label}`, say(limit[key]));
  }
  for (const interlock of content.interlocks) {
    for (const { key, label } of interlockFields) {
      if (key !== 'id') all.set(`Interlock ${interlock.id} · ${label}`, say(interlock[key]));
    }
  }
  for (const { channel, afterS } of content.staleness)
    all.set(`${titleOf(channel)} · oldest allowed, s`, say(afterS));
  for (const input of content.emergencyStopInputs) {
    for (const { key, label, options } of emergencyStopFields) {
      const value = options?.find((option) => option.value === input[key])?.label ?? input[key];
      all.set(`Emergency-stop input ${titleOf(input.channel)} · ${label}`, value);
    }
  }
  if (content.heartbeat) {
    all.set('Heartbeat channel', titleOf(content.heartbeat.channel));
    all.set('Heartbeat period, s', say(content.heartbeat.periodS));
  }
  all.set('Overruns in a row that trip', say(content.overrunLimit));
  all.set('Server silent for, s', say(content.serverSilenceS));
  return all;
}

/** What differs from one envelope to another, in words, in the order of the document. */
export function envelopeDifferences(
  before: EnvelopeContent,
  after: EnvelopeContent,
  titleOf: (channel: string) => string,
): Difference[] {
  const [old, present] = [leaves(before, titleOf), leaves(after, titleOf)];
  const names = new Set([...present.keys(), ...old.keys()]);
  return [...names]
    .map((where) => ({ where, before: old.get(where) ?? null, after: present.get(where) ?? null }))
    .filter((difference) => difference.before !== difference.after);
}
