import type { AdapterSession } from '../../contract.js';
import { serialTextAdapter } from '../serial-text.adapter.js';
import {
  type SerialTextAddress,
  type SerialTextAddressInput,
  serialTextAddressSchema,
} from '../serial-text-address.schema.js';
import { serialTextConfigurationSchema } from '../serial-text-configuration.schema.js';

/** Waits end as soon as they can; a busy machine gets time. */
export const patient = { timeout: 4000, interval: 5 };

export const textAddress = (address: SerialTextAddressInput): SerialTextAddress =>
  serialTextAddressSchema.parse(address);

/** Opens a session on a port with the real binding. */
export function openText(
  path: string,
  configuration: object,
  signal = new AbortController().signal,
): Promise<AdapterSession<SerialTextAddress>> {
  return serialTextAdapter.open(serialTextConfigurationSchema.parse({ path, ...configuration }), signal);
}

/** Reads addresses once: the values, or the code and text of what is wrong. */
export async function readText(
  session: AdapterSession<SerialTextAddress>,
  ...addresses: SerialTextAddressInput[]
): Promise<(number | string)[]> {
  const { values, faults } = await session.read(session.planRead(addresses.map(textAddress)));
  return faults.map((fault, index) => (fault ? `${fault.code}: ${fault.message}` : (values[index] ?? NaN)));
}
