import type { z } from 'zod';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import type { ModbusAddress } from './modbus-address.schema.js';

/** @throws adapter.misconfigured naming the address at fault */
export function parseAddresses(
  schema: z.ZodType<ModbusAddress>,
  addresses: readonly ModbusAddress[],
): ModbusAddress[] {
  return addresses.map((address, index) => parseOrMisconfigured(schema, address, `addresses[${index}]`));
}
