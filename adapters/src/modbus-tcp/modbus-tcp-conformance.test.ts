import { describe, it } from 'vitest';
import { describeAdapterConformance } from '../conformance/describe-adapter-conformance.js';
import { startJsmodbusServer } from '../modbus/testing/jsmodbus-server.js';
import { startModbusSerialServer } from '../modbus/testing/modbus-serial-server.js';
import { modbusTcpFixture } from './modbus-tcp.fixture.js';

describeAdapterConformance(
  modbusTcpFixture('modbus-tcp on a modbus-serial server', startModbusSerialServer),
  {
    describe,
    it,
  },
);
describeAdapterConformance(modbusTcpFixture('modbus-tcp on a jsmodbus server', startJsmodbusServer), {
  describe,
  it,
});
