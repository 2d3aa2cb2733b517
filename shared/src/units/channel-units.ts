import type { Rig } from '../rigs/rig.schema.js';
import { parseUnit } from './parse-unit.js';
import type { Unit } from './unit.js';

/** The unit of each channel of a rig, by id: what the units of its expressions are checked with. */
export function channelUnits(rig: Rig): Map<string, Unit> {
  return new Map(rig.channels.map(({ id, unit }) => [id, parseUnit(unit)]));
}
