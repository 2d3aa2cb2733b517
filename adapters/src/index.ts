export * from './conformance/conformance-fixture.js';
export {
  describeAdapterConformance,
  describeAdapterLeaks,
} from './conformance/describe-adapter-conformance.js';
export * from './contract.js';
export * from './faults/fault-control.js';
export { withFaults } from './faults/with-faults.js';
export { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
export type { InMemoryAddress, InMemoryConfiguration } from './in-memory/in-memory.schema.js';
export * from './in-memory/memory-store.js';
export * from './keep-connected.js';
export type { ModbusAddress } from './modbus/modbus-address.schema.js';
export { modbusRtuAdapter } from './modbus-rtu/modbus-rtu.adapter.js';
export type { ModbusRtuConfiguration } from './modbus-rtu/modbus-rtu-configuration.schema.js';
export { modbusTcpAdapter } from './modbus-tcp/modbus-tcp.adapter.js';
export type { ModbusTcpConfiguration } from './modbus-tcp/modbus-tcp-configuration.schema.js';
export { formSchemaOf, type JsonSchema } from './plug-ins/check-adapter.js';
export { isPath } from './plug-ins/find-entry.js';
export type { AdapterListing } from './adapter-listing.js';
export * from './registry.js';
export { shippedAdapters } from './shipped-adapters.js';
export * from './timer-port.js';
export { listSerialPorts, type SerialPortListing } from './serial/list-serial-ports.js';
export {
  type InstrumentProfile,
  type ProfileChannel,
  instrumentProfiles,
} from './serial-text/instrument-profiles.js';
export type { SerialTextAddress } from './serial-text/serial-text-address.schema.js';
export { makeSerialTextAdapter, serialTextAdapter } from './serial-text/serial-text.adapter.js';
export type { SerialTextConfiguration } from './serial-text/serial-text-configuration.js';
