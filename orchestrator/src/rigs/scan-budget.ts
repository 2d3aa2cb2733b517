import type { Adapter, AdapterRegistry } from '@cresthold/adapters';
import { DomainError, rigSchema, type FieldFault } from '@cresthold/shared';
import { toFieldFault } from '../problem-details/request-validation.pipe.js';
import type { RigDraft, ScanBudget } from './dto/scan-budget.dto.js';
import { rigFaults } from './rig-faults.js';

type ConnectionBudget = ScanBudget['connections'][number];
type Fields = Record<string, unknown>;

/** As many as a rig may have; more is a fault by itself. */
const connectionsMax = 16;
const channelsMax = 200;

/** What the scan of a draft would cost, and its faults; opens and saves nothing. */
export function scanBudgetOf(draft: RigDraft, adapters: AdapterRegistry): ScanBudget {
  const connections = listOf(draft.connections, connectionsMax);
  const channels = listOf(draft.channels, channelsMax);
  const budgets = connections.map((connection) => budgetOf(connection, channels, adapters));
  const periodMs = periodOf(draft.periodMs);
  const times = budgets.flatMap(({ wireS }) => (wireS === null ? [] : [wireS]));
  const wireS = times.length > 0 ? Math.max(...times) : null;
  return {
    faults: draftFaults(draft, adapters),
    connections: budgets,
    requests: budgets.reduce((sum, { requests }) => sum + (requests ?? 0), 0),
    wireS,
    periodMs,
    shareOfPeriod: wireS === null || periodMs === null ? null : (1000 * wireS) / periodMs,
  };
}

/** Faults of the draft; where its outline is at fault, wiring is judged all the same as far as it can be read. */
function draftFaults(draft: RigDraft, adapters: AdapterRegistry): FieldFault[] {
  const parsed = rigSchema.safeParse(draft);
  if (parsed.success) return rigFaults(parsed.data, adapters);
  const faults = parsed.error.issues.map(toFieldFault);
  const known = new Set(faults.map(({ field }) => field));
  return [...faults, ...wiringFaults(draft, adapters).filter(({ field }) => !known.has(field))];
}

function wiringFaults(draft: RigDraft, adapters: AdapterRegistry): FieldFault[] {
  const connections = listOf(draft.connections, connectionsMax);
  const adapterOf = new Map(connections.map(({ id, adapter }) => [id, adapter]));
  const ofConnections = connections.flatMap(({ adapter, configuration }, index) =>
    typeof adapter === 'string' && adapter !== ''
      ? adapters.checkConnection({ adapter, configuration: configuration ?? {} }, `connections[${index}]`)
      : [],
  );
  const ofChannels = listOf(draft.channels, channelsMax).flatMap(({ kind, connection, address }, index) => {
    const adapter = adapterOf.get(connection);
    if (kind === 'derived' || typeof adapter !== 'string' || !adapters.adapters.has(adapter)) return [];
    return adapters.checkAddress(adapter, address ?? {}, `channels[${index}]`);
  });
  return [...ofConnections, ...ofChannels];
}

function budgetOf(connection: Fields, channels: Fields[], adapters: AdapterRegistry): ConnectionBudget {
  const id = typeof connection.id === 'string' ? connection.id : '';
  const wired = channels.filter(
    (channel) => channel.kind !== 'derived' && channel.connection === connection.id,
  );
  const adapter = adapters.adapters.get(String(connection.adapter));
  const addresses = wired.flatMap(({ address }) => {
    const parsed = adapter?.manifest.addressSchema.safeParse(address);
    return parsed?.success ? [parsed.data] : [];
  });
  const counts = { id, channels: addresses.length, leftOut: wired.length - addresses.length };
  const untold = (note: string) => ({ ...counts, requests: null, wireS: null, note });
  if (adapter === undefined) return untold('No such adapter is installed.');
  const configuration = adapter.manifest.configurationSchema.safeParse(connection.configuration);
  if (!configuration.success) return untold('Its configuration is not finished.');
  if (adapter.estimate === undefined) return untold('The adapter does not tell what a read costs.');
  return estimated(adapter, configuration.data, addresses, counts);
}

function estimated(
  adapter: Adapter,
  configuration: unknown,
  addresses: unknown[],
  counts: Pick<ConnectionBudget, 'id' | 'channels' | 'leftOut'>,
): ConnectionBudget {
  try {
    const { requests, wireS } = adapter.estimate?.(configuration, addresses) ?? {
      requests: null,
      wireS: null,
    };
    return { ...counts, requests, wireS, note: null };
  } catch (error) {
    if (!(error instanceof DomainError)) throw error;
    return { ...counts, requests: null, wireS: null, note: error.message };
  }
}

function periodOf(value: unknown): number | null {
  const parsed = rigSchema.shape.periodMs.safeParse(value);
  return parsed.success ? parsed.data : null;
}

function listOf(value: unknown, most: number): Fields[] {
  if (!Array.isArray(value)) return [];
  return value.slice(0, most).map((item: unknown) => (isFields(item) ? item : {}));
}

function isFields(value: unknown): value is Fields {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}
