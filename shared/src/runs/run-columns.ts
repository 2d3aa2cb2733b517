import { z } from 'zod';
import type { Rig } from '../rigs/rig.schema.js';

/** What a column of a run file's `scan` table holds. */
export const runColumnSchema = z.object({
  /** Column name: `o2`, `airTrim`, `airTrim.requested`, `airTrim.applied`, `objective`, `seek.estimate.airTrim`. */
  name: z.string(),
  title: z.string(),
  unit: z.string(),
  kind: z.enum(['reading', 'requested', 'applied', 'objective', 'signal']),
});
export type RunColumn = z.infer<typeof runColumnSchema>;

/**
 * The value columns of a run in their order: every channel but the traces, which are arrays and have a table of their
 * own; requested and applied value of each
 * actuator; the objective; the sequencer's signals. NULL in a row means not good in that scan.
 */
export function runColumns(rig: Rig, objectiveUnit: string, signalNames: readonly string[]): RunColumn[] {
  const numbers = rig.channels.filter(({ kind }) => kind !== 'trace');
  const columns: RunColumn[] = numbers.map(({ id, title, unit }) => ({
    name: id,
    title,
    unit,
    kind: 'reading',
  }));
  for (const c of rig.channels) {
    if (c.kind !== 'actuator') continue;
    columns.push({
      name: `${c.id}.requested`,
      title: `${c.title}, requested`,
      unit: c.unit,
      kind: 'requested',
    });
    columns.push({ name: `${c.id}.applied`, title: `${c.title}, applied`, unit: c.unit, kind: 'applied' });
  }
  columns.push({ name: 'objective', title: 'Objective', unit: objectiveUnit, kind: 'objective' });
  for (const name of signalNames) columns.push(signalColumn(name, rig));
  return columns;
}

/** An estimate has the unit of its actuator; what the other inner signals of a law stand for is the law's business. */
function signalColumn(name: string, rig: Rig): RunColumn {
  const [step, signal, channelId] = name.split('.');
  const channel = signal === 'estimate' ? rig.channels.find(({ id }) => id === channelId) : undefined;
  return channel
    ? { name, title: `${channel.title}, estimate of ${step}`, unit: channel.unit, kind: 'signal' }
    : { name, title: name, unit: '', kind: 'signal' };
}
