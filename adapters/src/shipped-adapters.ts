import type { Adapter } from './contract.js';
import { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
import { modbusRtuAdapter } from './modbus-rtu/modbus-rtu.adapter.js';
import { modbusTcpAdapter } from './modbus-tcp/modbus-tcp.adapter.js';
import { serialTextAdapter } from './serial-text/serial-text.adapter.js';

/** The adapters that come with the product, in the order in which they are listed. */
export const shippedAdapters: readonly Adapter[] = [
  modbusTcpAdapter,
  modbusRtuAdapter,
  serialTextAdapter,
  inMemoryAdapter,
];
