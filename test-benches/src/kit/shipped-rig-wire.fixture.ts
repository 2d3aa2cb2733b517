import { AdapterRegistry, shippedAdapters, type AdapterSession } from '@cresthold/adapters';
import { rigSchema, type WiredChannel } from '@cresthold/shared';
import type { RigInput } from './scenario-input.js';

/** A rig as it ships, opened over its real wire by the adapter that its document names. */
export interface OpenedRig {
  readonly session: AdapterSession<unknown>;
  /** Reads all channels once. @throws where one of them is not good */
  read(): Promise<Map<string, number>>;
  /** Writes one channel. @throws where the device did not take it */
  write(id: string, value: number): Promise<void>;
}

/**
 * @param patience times of the adapter's configuration that a busy machine keeps, in place of the rig's own
 * @throws DomainError naming what the adapter does not take of the rig's document
 */
export async function openShippedRig(
  input: RigInput,
  patience: Readonly<Record<string, number>>,
): Promise<OpenedRig> {
  const rig = rigSchema.parse(input);
  const [connection] = rig.connections;
  if (!connection) throw new Error('The rig has no connection.');
  const adapter = new AdapterRegistry(shippedAdapters).find(connection.adapter);
  const { manifest } = adapter;
  const configuration = manifest.configurationSchema.parse({
    ...connection.configuration,
    ...patience,
  });
  const session = await adapter.open(configuration, new AbortController().signal);
  const wired = rig.channels.filter((channel): channel is WiredChannel => channel.kind !== 'derived');
  const addresses = wired.map(({ address }) => manifest.addressSchema.parse(address));
  const plan = session.planRead(addresses);
  return {
    session,
    async read() {
      const { values, faults, lost } = await session.read(plan);
      const fault = lost ?? faults.find((each) => each !== null);
      if (fault) throw fault;
      return new Map(wired.map(({ id }, i) => [id, values[i] ?? NaN]));
    },
    async write(id, value) {
      const address = addresses[wired.findIndex((channel) => channel.id === id)];
      const { faults, lost } = await session.write([address], [value]);
      const fault = lost ?? faults[0];
      if (fault) throw fault;
    },
  };
}
