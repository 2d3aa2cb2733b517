import { describe, it } from 'vitest';
import { describeAdapterLeaks } from '../conformance/describe-adapter-conformance.js';
import { startJsmodbusServer } from '../modbus/testing/jsmodbus-server.js';
import { modbusTcpFixture } from './modbus-tcp.fixture.js';

describeAdapterLeaks(modbusTcpFixture('modbus-tcp on a jsmodbus server', startJsmodbusServer), {
  describe,
  it: (title, body) => {
    it(title, { timeout: 300_000 }, body);
  },
});
