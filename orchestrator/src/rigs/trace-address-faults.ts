import type { AdapterRegistry } from '@cresthold/adapters';
import { tracePointsMax, type FieldFault, type WiredChannel } from '@cresthold/shared';

/** Whether an address carries as many points as its channel needs; it says how many by `points`, one where it does not. */
export function traceAddressFaults(
  { kind, address }: WiredChannel,
  adapterId: string,
  adapters: AdapterRegistry,
  root: string,
): FieldFault[] {
  const points = pointsOf(adapters.adapters.get(adapterId)?.manifest.addressSchema.safeParse(address).data);
  const fault = (message: string) => [{ field: `${root}.address.points`, message }];
  if (kind !== 'trace') {
    return points > 1
      ? fault('This is no trace and has one point: leave "points" out, or make it a trace.')
      : [];
  }
  if (points < 2) return fault('A trace has at least two points: say how many.');
  return points > tracePointsMax ? fault(`A trace has at most ${tracePointsMax} points.`) : [];
}

function pointsOf(address: unknown): number {
  if (typeof address !== 'object' || address === null || !('points' in address)) return 1;
  return typeof address.points === 'number' ? address.points : 1;
}
