export * from './contract.js';
export { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
export type { InMemoryAddress, InMemoryConfiguration } from './in-memory/in-memory.schema.js';
export * from './in-memory/memory-store.js';
export * from './keep-connected.js';
export type { ModbusAddress } from './modbus/modbus-address.schema.js';
export { modbusTcpAdapter } from './modbus-tcp/modbus-tcp.adapter.js';
export type { ModbusTcpConfiguration } from './modbus-tcp/modbus-tcp-configuration.schema.js';
export * from './registry.js';
