import { preflight, type PreflightFault } from '@cresthold/shared';
import { shippedDocuments } from './scenario-entry.fixture.js';
import type { RigEntryInput } from './scenario-input.js';
import { gridOf } from './virtual-wire.fixture.js';

/** Everything that preflight finds in the experiments of a rig, as the rig host would judge them. */
export function preflightShipped(entry: RigEntryInput): PreflightFault[] {
  return entry.experiments.flatMap(({ key }) => {
    const { rig, envelope, objective, experiment } = shippedDocuments(entry, key);
    const grids = rig.channels.flatMap((channel) => {
      const grid = channel.kind === 'actuator' ? gridOf(channel) : null;
      return grid ? [[channel.id, grid] as const] : [];
    });
    return preflight({ rig, envelope, objective, graph: experiment.graph, grids: new Map(grids) });
  });
}
